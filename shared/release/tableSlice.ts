import type { ReleaseResult, ReleaseStep } from './releaseResult'
import { editions, selectionRows, type Band, type EditionName, type RowCode } from './selectionTable'

export type TableSlice = {
  edition: EditionName
  columns: Band[]
  rows: { code: RowCode; cells: (number | null)[] }[]
  /** The cell that the sole length and the row lead to, as indices into this slice. */
  cell: { row: number; column: number }
  /** The cell whose value was taken or shown instead, when that cell is empty. */
  sideways: { row: number; column: number } | null
}

type StepOf<Rule extends ReleaseStep['rule']> = Extract<ReleaseStep, { rule: Rule }>

function stepOf<Rule extends ReleaseStep['rule']>(
  steps: ReleaseStep[],
  rule: Rule,
): StepOf<Rule> | undefined {
  return steps.find((step): step is StepOf<Rule> => step.rule === rule)
}

/**
 * The part of the table around the cell that a result used, for drawing why. `around` counts rows and columns to
 * each side; a sideways cell is always inside. Null: the computation ended before it reached the table.
 */
export function tableSlice(result: ReleaseResult, around = { rows: 2, columns: 2 }): TableSlice | null {
  if (!('steps' in result)) return null
  const used = stepOf(result.steps, 'column')
  if (!used) return null
  const { columns, values } = editions[used.edition]
  const sideways = stepOf(result.steps, 'sideways')
  const rowIndex = selectionRows.findIndex((row) => row.code === used.row)
  const firstRow = Math.max(0, rowIndex - around.rows)
  const firstColumn = Math.max(0, Math.min(used.column - around.columns, sideways?.column ?? used.column))
  const endColumn = Math.max(used.column + around.columns, sideways?.column ?? used.column) + 1
  const row = rowIndex - firstRow
  return {
    edition: used.edition,
    columns: columns.slice(firstColumn, endColumn),
    rows: selectionRows.slice(firstRow, rowIndex + around.rows + 1).map(({ code }) => ({
      code,
      cells: values[code].slice(firstColumn, endColumn),
    })),
    cell: { row, column: used.column - firstColumn },
    sideways: sideways ? { row, column: sideways.column - firstColumn } : null,
  }
}
