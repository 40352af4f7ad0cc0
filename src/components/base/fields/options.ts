/** One of the things to choose from. */
export interface Option<Value extends string | number | boolean = string> {
  value: Value
  label: string
  /** A second, softer line or word. */
  note?: string
  disabled?: boolean
}
