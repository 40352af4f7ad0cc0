import type { ReleaseStep } from '#shared/release/releaseResult'
import type { RowStep } from '#shared/schemas/fittings'

/** The rows that rules moved, without any body value: what a record may keep for good. Negative is up, lower. */
export function rowStepsOf(steps: readonly ReleaseStep[]): RowStep[] {
  return steps.flatMap((step) =>
    step.rule === 'type' || step.rule === 'age' || step.rule === 'request'
      ? [{ rule: step.rule, rows: step.shift }]
      : [],
  )
}
