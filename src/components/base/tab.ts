import type { RouteLocationRaw } from 'vue-router'

/** A tab is a link: each has an address of its own. */
export interface Tab {
  label: string
  to: RouteLocationRaw
  /** Says it itself where the address differs by its query only. */
  here?: boolean
}
