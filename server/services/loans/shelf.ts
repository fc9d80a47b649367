import type { KindAvailability, ShelfAvailability } from '#shared/loans/contract'
import { freePerDay, type Hold } from '#shared/loans/availability'
import type { KindCategory } from '#shared/kit/vocabulary'
import type { DayRange } from '#shared/time/day-range'
import { prepared } from '../../db/prepared.ts'
import type { Deps } from '../../deps.ts'
import { notFound } from '../../errors.ts'
import {
  HOLDS_OF_ALL,
  HOLDS_OF_KINDS,
  HOLDS_OF_POOL,
  type HoldBind,
  type HoldRow,
  POOL,
  type PoolRow,
  POOLS,
} from './shelf-queries.ts'

interface Asked extends DayRange {
  wild?: 'true' | 'false' | undefined
}

const poolAsked = (wild: Asked['wild']) => (wild === undefined ? null : wild === 'true' ? 1 : 0)

/** What stands in a member's way between two days. */
export const holdBind = (deps: Deps, memberId: string, { from, to }: DayRange): HoldBind => ({
  from,
  to,
  today: deps.clock.today(),
  now: deps.clock.now(),
  memberId,
})

/**
 * How many of a kind are free on each day, as this member would find it.
 * @throws AppError `not-found`
 */
export function kindAvailability(
  deps: Deps,
  memberId: string,
  kindId: string,
  asked: Asked,
): KindAvailability {
  const bind = { kindId, wild: poolAsked(asked.wild) }
  const pool = prepared<typeof bind, PoolRow>(deps.db, POOL).get(bind)
  if (!pool) throw notFound('That kind')
  const holds = prepared<HoldBind & { kindId: string; wild: 0 | 1 }, HoldRow>(deps.db, HOLDS_OF_POOL).all({
    ...holdBind(deps, memberId, asked),
    kindId,
    wild: pool.wild,
  })
  const days = freePerDay(pool.serviceable, holds, asked)
  return { kindId, from: asked.from, to: asked.to, minFree: least(days.map(({ free }) => free)), days }
}

/** The same for every kind that is lent: the shelf at a glance. */
export function shelfAvailability(
  deps: Deps,
  memberId: string,
  asked: Asked & { category?: KindCategory | undefined },
): ShelfAvailability {
  const bind = { wild: poolAsked(asked.wild), category: asked.category ?? null }
  const pools = prepared<typeof bind, PoolRow & { name: string }>(deps.db, POOLS).all(bind)
  const holds = byPool(
    prepared<HoldBind, HoldRow>(deps.db, HOLDS_OF_ALL).all(holdBind(deps, memberId, asked)),
  )
  const kinds = pools.map(({ kindId, name, wild, serviceable }) => {
    const free = freePerDay(serviceable, holds.get(poolKey(kindId, wild)) ?? [], asked).map((day) => day.free)
    return { kindId, name, serviceable, minFree: least(free), free }
  })
  return { from: asked.from, to: asked.to, kinds }
}

/** What stands in a member's way for some kinds, by pool. */
export function holdsOfKinds(deps: Deps, bind: HoldBind, kindIds: readonly string[]): Map<string, Hold[]> {
  return byPool(
    prepared<HoldBind & { kindIds: string }, HoldRow>(deps.db, HOLDS_OF_KINDS).all({
      ...bind,
      kindIds: JSON.stringify(kindIds),
    }),
  )
}

/** A kind and which of its two pools: kept for wild cultures, or not. */
export const poolKey = (kindId: string, wild: boolean | 0 | 1) => `${wild ? 'w' : 't'}:${kindId}`

function byPool(rows: readonly HoldRow[]): Map<string, Hold[]> {
  const pools = new Map<string, Hold[]>()
  for (const row of rows) {
    const key = poolKey(row.kindId, row.wild)
    const pool = pools.get(key)
    if (pool) pool.push(row)
    else pools.set(key, [row])
  }
  return pools
}

const least = (numbers: readonly number[]) => (numbers.length === 0 ? 0 : Math.min(...numbers))
