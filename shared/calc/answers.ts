import { releaseInputSchema } from '#shared/release/releaseInput'
import type { ReleaseResult } from '#shared/release/releaseResult'
import { releaseSetting } from '#shared/release/releaseSetting'
import { trackInputSchema } from '#shared/track/trackInput'
import { trackPlan, type TrackPlan } from '#shared/track/trackPlan'
import { invalidInput, invalidInputOf, type InvalidInput } from './invalidInput'

/** A release value for anything that JSON can hold: not well formed is an answer too. */
export function answerRelease(input: unknown): ReleaseResult {
  const parsed = releaseInputSchema.safeParse(input)
  return parsed.success ? releaseSetting(parsed.data) : invalidInputOf(parsed.error)
}

/** A track plan for anything that JSON can hold. */
export function answerTrack(input: unknown): TrackPlan {
  const parsed = trackInputSchema.safeParse(input)
  if (!parsed.success) return invalidInputOf(parsed.error)
  const { model, soleLengthMm, offsetMm, current } = parsed.data
  return trackPlan(model, soleLengthMm, { offsetMm, current })
}

export type CalcAnswer = ReleaseResult | TrackPlan

export const calcAnswers: Readonly<Record<string, (input: unknown) => CalcAnswer>> = {
  release: answerRelease,
  track: answerTrack,
}

/** The answer to one line of JSON. */
export function answerLine(answer: (input: unknown) => CalcAnswer, line: string): CalcAnswer | InvalidInput {
  let input: unknown
  try {
    input = JSON.parse(line)
  } catch {
    return invalidInput([], 'expected one JSON object on the line')
  }
  return answer(input)
}
