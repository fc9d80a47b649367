import type { RouteLocationRaw } from 'vue-router'

/** A step of the way to this page; the last may be words only. */
export interface Crumb {
  label: string
  to?: RouteLocationRaw
}
