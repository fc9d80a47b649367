import { addDays } from '#shared/time/day'
import { addMinutes, instantMs } from '#shared/time/instant'
import { clockFrom } from '../../clock.ts'
import type { Deps } from '../../deps.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { calibrateItem } from '../../services/kit/calibrations.ts'
import { reportFault, resolveFault } from '../../services/kit/faults.ts'
import { recordHygiene } from '../../services/kit/hygiene.ts'
import { giveInduction } from '../../services/kit/inductions.ts'
import { addItem, changeItem, readItem } from '../../services/kit/items.ts'
import { addKind } from '../../services/kit/kinds.ts'
import type { SeedContext } from './index.ts'
import {
  DIRTY,
  FAULTS,
  GONE,
  INDUCTIONS,
  SANITISED,
  SHELVES,
  TURNED_WILD,
  WATER_CHECKS,
  type SeedKind,
} from './kit-shelf.ts'

/** The shelves are older than everything else in the demo. */
const BUILT_DAYS_AGO = 420

/** Kinds and items with their past; all of it through the services, each thing at its own time. */
export function seedKit(context: SeedContext) {
  const { deps, people } = context
  const ago = (hours: number): Deps => {
    const then = addMinutes(deps.clock.now(), -Math.round(hours * 60))
    return {
      ...deps,
      clock: clockFrom(
        () => instantMs(then),
        () => deps.clock.timeZone,
      ),
    }
  }
  const days = (count: number) => ago(count * 24)
  const someone = (login: string): SignedIn => {
    const id = people[login]
    if (!id) throw new Error(`the demo has no ${login}`)
    const role = login.startsWith('steward') ? 'steward' : 'member'
    return { id, name: login, email: `${login}@barmhouse.example`, role, status: 'active' }
  }
  const steward = someone('steward')

  for (const shelf of SHELVES) stockShelf(context, days(BUILT_DAYS_AGO), steward, shelf)
  for (const [login, kind, daysAgo] of INDUCTIONS)
    giveInduction(
      deps,
      steward,
      idOf(people, login),
      idOf(context.kinds, kind),
      addDays(deps.clock.today(), -daysAgo),
    )
  for (const [tag, waterReadingSg, waterTemperatureC, daysAgo] of WATER_CHECKS)
    calibrateItem(days(daysAgo), steward, tag, { waterReadingSg, waterTemperatureC })
  for (const { tag, by, daysAgo, settled, ...report } of FAULTS) {
    const fault = reportFault(days(daysAgo), someone(by), tag, report)
    if (settled) resolveFault(days(settled.daysAgo), steward, fault.id, settled.note)
  }
  for (const [tag, daysAgo, reason] of TURNED_WILD)
    changeItem(days(daysAgo), steward, tag, versionOf(deps, tag), { wild: true, reason })
  for (const [tag, status, daysAgo, reason] of GONE)
    changeItem(days(daysAgo), steward, tag, versionOf(deps, tag), { status, reason })
  for (const tag of DIRTY) recordHygiene(ago(20), someone('steward2'), tag, { state: 'dirty' })
  for (const [tag, agent, concentration, contactMinutes, hoursAgo] of SANITISED) {
    recordHygiene(ago(hoursAgo + 1), steward, tag, {
      state: 'clean',
      agent: 'percarbonate',
      contactMinutes: 15,
    })
    recordHygiene(ago(hoursAgo), steward, tag, { state: 'sanitised', agent, concentration, contactMinutes })
  }
}

function stockShelf(context: SeedContext, deps: Deps, steward: SignedIn, shelf: SeedKind) {
  const kind = addKind(deps, steward, shelf.facts)
  context.kinds[shelf.key] = kind.id
  for (let n = 1; n <= shelf.count; n++) {
    const tag = `${shelf.tags}-${String(n).padStart(2, '0')}`
    const place = shelf.shelves[(n - 1) % shelf.shelves.length] ?? null
    const item = addItem(deps, steward, { tag, kindId: kind.id, shelf: place, hygiene: 'clean' })
    context.items[tag] = item.id
  }
}

function idOf(ids: Record<string, string>, key: string): string {
  const id = ids[key]
  if (id === undefined) throw new Error(`the demo has no ${key}`)
  return id
}

const versionOf = (deps: Deps, tag: string) => readItem(deps, { id: '' }, tag).version
