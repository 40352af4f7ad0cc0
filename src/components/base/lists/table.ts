/** A column of BaseTable. `value` reads the cell where it is not simply `row[key]`. */
export interface TableColumn<Row> {
  key: string
  label: string
  sortable?: boolean
  align?: 'start' | 'end'
  width?: string
  value?: (row: Row) => string | number | null | undefined
}

export interface TableSort {
  key: string
  descending: boolean
}
