import { type Role, roleCovers } from '#shared/people/vocabulary'
import type { IconName } from '@/components/base/icons'
import { PATHS, type PageName } from './routes.ts'

export interface Place {
  name: PageName
  label: string
  icon: IconName
  path: string
}

interface PlaceFor extends Omit<Place, 'path'> {
  access?: Role
}

/** The header of wide screens, left to right. */
const HEADER: PlaceFor[] = [
  { name: 'today', label: 'Today', icon: 'today' },
  { name: 'desk', label: 'Desk', icon: 'desk', access: 'steward' },
  { name: 'kit', label: 'Kit', icon: 'kit' },
  { name: 'calendar', label: 'Calendar', icon: 'calendar' },
  { name: 'batches', label: 'Batches', icon: 'batch' },
  { name: 'yeast', label: 'Yeast', icon: 'yeast' },
  { name: 'larder', label: 'Larder', icon: 'larder' },
  { name: 'bench', label: 'Bench', icon: 'bench' },
]

/** What stands under More: everything that is not always in sight. */
const FURTHER: PlaceFor[] = [
  { name: 'loans', label: 'My loans', icon: 'collect' },
  { name: 'stocktake', label: 'Stocktake', icon: 'list', access: 'steward' },
  { name: 'reports', label: 'Reports', icon: 'chart', access: 'steward' },
  { name: 'members', label: 'Members', icon: 'people', access: 'steward' },
  { name: 'space', label: 'Space', icon: 'settings', access: 'admin' },
  { name: 'me', label: 'Me', icon: 'person' },
]

const MEMBER_BAR: PageName[] = ['today', 'kit', 'batches', 'yeast']
const STEWARD_BAR: PageName[] = ['desk', 'kit', 'yeast']

const open = (places: PlaceFor[], role: Role, has: (name: PageName) => boolean): Place[] =>
  places
    .filter((place) => roleCovers(role, place.access ?? 'member') && has(place.name))
    .map(({ name, label, icon }) => ({ name, label, icon, path: PATHS[name] }))

export const headerPlaces = (role: Role, has: (name: PageName) => boolean) => open(HEADER, role, has)

/** The bottom bar of phones: four places and More; for stewards Scan stands in the middle. */
export function barPlaces(role: Role, has: (name: PageName) => boolean): Place[] {
  const wanted = roleCovers(role, 'steward') ? STEWARD_BAR : MEMBER_BAR
  return open(HEADER, role, has).filter((place) => wanted.includes(place.name))
}

/** Places that the bottom bar leaves out, for the More page. */
export function morePlaces(role: Role, has: (name: PageName) => boolean): Place[] {
  const shown = barPlaces(role, has).map((place) => place.name)
  return [
    ...open(HEADER, role, has).filter((place) => !shown.includes(place.name)),
    ...open(FURTHER, role, has),
  ]
}
