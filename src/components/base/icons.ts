import {
  AlertCircle,
  BasketOutline,
  BeakerOutline,
  CalendarOutline,
  CheckmarkCircle,
  ChevronDownOutline,
  ChevronForwardOutline,
  CloseOutline,
  EyeOffOutline,
  EyeOutline,
  FileTrayFullOutline,
  FileTrayStackedOutline,
  FlaskOutline,
  LogOutOutline,
  MenuOutline,
  PersonCircleOutline,
  RefreshOutline,
  ScanOutline,
  SnowOutline,
  TimeOutline,
  TodayOutline,
} from '@vicons/ionicons5'
import { type Component, shallowRef } from 'vue'
import type { FURTHER_ICONS } from './icons-further.ts'

/** Icons of the shell and the door. One meaning keeps one picture; the others stand in `icons-further.ts`. */
export const FIRST_ICONS = {
  batch: FlaskOutline,
  bench: BeakerOutline,
  calendar: CalendarOutline,
  clock: TimeOutline,
  close: CloseOutline,
  desk: FileTrayFullOutline,
  down: ChevronDownOutline,
  forward: ChevronForwardOutline,
  hide: EyeOffOutline,
  kit: FileTrayStackedOutline,
  larder: BasketOutline,
  more: MenuOutline,
  overdue: AlertCircle,
  pass: CheckmarkCircle,
  person: PersonCircleOutline,
  retry: RefreshOutline,
  scan: ScanOutline,
  show: EyeOutline,
  'sign-out': LogOutOutline,
  today: TodayOutline,
  yeast: SnowOutline,
} as const satisfies Record<string, Component>

export type IconName = keyof typeof FIRST_ICONS | keyof typeof FURTHER_ICONS

const further = shallowRef<Partial<Record<IconName, Component>>>({})
let asked = false

/** The other icons are fetched once; till then an icon is an empty box of its size. */
export function fetchFurtherIcons() {
  if (asked) return
  asked = true
  import('./icons-further.ts').then(
    (module) => (further.value = module.FURTHER_ICONS),
    () => (asked = false),
  )
}

export function iconNamed(name: IconName): Component | undefined {
  const first: Partial<Record<IconName, Component>> = FIRST_ICONS
  if (!first[name]) fetchFurtherIcons()
  return first[name] ?? further.value[name]
}
