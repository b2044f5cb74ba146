/** One choice of a list, as the ui components take it. */
export interface Choice {
  value: string
  label: string
  group?: string | undefined
}
