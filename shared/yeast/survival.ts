import { packetViability } from '../brewing/vitality.ts'
import type { DrinkUse, Storage, YeastForm } from '../brewing/vocabulary.ts'
import type { CalendarDay } from '../time/day.ts'
import type { LotStanding } from './lot-evidence.ts'

/** What is on the pack and what was done with it. */
export interface PacketFacts {
  strain: string
  form: YeastForm
  use: DrinkUse
  madeOn: CalendarDay | null
  bestBefore: CalendarDay | null
  openedOn: CalendarDay | null
  /** Oldest first; at least one. */
  storage: readonly { from: CalendarDay; storage: Storage }[]
}

/** Share alive, 0 to 1, with a band of about 80 %. */
export interface Alive {
  estimate: number
  low: number
  high: number
}

/**
 * Share of a packet alive on a day by age, place and opening alone.
 * @throws RangeError when `on` is before the day it was made
 */
export function survivalOf(packet: PacketFacts, on: CalendarDay): Alive {
  const { form, madeOn, bestBefore, openedOn, storage } = packet
  const { estimate, low, high } = packetViability({ form, madeOn, bestBefore, openedOn, storage, on })
  return { estimate, low, high }
}

/**
 * The storage estimate, moved by what the lot did. A bad lot scales it down and lets the band reach as low as the lot
 * might be; a good one moves estimate and low end towards the top of their band, never past it. Keeps the order of
 * storage: an older, warmer or longer opened packet of the lot never comes out higher.
 */
export function withLot(survival: Alive, lot: LotStanding): Alive {
  const narrowed = (end: number) => survival.estimate ** (1 - lot.width) * end ** lot.width
  const low = narrowed(survival.low)
  const high = narrowed(survival.high)
  if (lot.factor > 1) {
    const gain = 1 - 1 / lot.factor
    const estimate = survival.estimate + (survival.high - survival.estimate) * gain
    return { estimate, low: low + (survival.estimate - low) * gain, high: Math.max(estimate, high) }
  }
  const estimate = survival.estimate * lot.factor
  return {
    estimate,
    low: low * Math.min(lot.factor, lot.low),
    high: Math.max(estimate, high * Math.min(1, lot.high)),
  }
}
