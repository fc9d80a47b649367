import type { RouteLocationRaw } from 'vue-router'
import type { IconName } from './icons.ts'

/** One place of the navigation. */
export interface ShellPlace {
  label: string
  to: RouteLocationRaw
  icon: IconName
  /** Lit: the page is this place, or belongs to it. */
  here: boolean
}
