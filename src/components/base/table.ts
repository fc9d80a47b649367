export interface Column<K extends string = string> {
  key: K
  label: string
  /** Numbers stand right. */
  align?: 'right'
  sortable?: boolean
  /** Left out on phones. */
  wideOnly?: boolean
  /** Names the row: a row heading. */
  heading?: boolean
}

export interface Sorting {
  key: string
  descending: boolean
}
