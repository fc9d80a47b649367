import {
  DRY_ACTIVATION_J_PER_MOL,
  DRY_LOSS_PER_YEAR_20C,
  DRY_MODEL_TOP_C,
  FRESH_SHORTFALL,
  FROZEN_WET_SURVIVAL,
  LIQUID_LOSS_PER_MONTH_4C,
  LOT_SPREAD,
  OPENED_FACTOR,
  OPENED_FACTOR_SPREAD,
  SHELF_LIFE_MONTHS,
  SLURRY_FACTOR,
  STORAGE_C,
  Z80,
} from './judgement.ts'
import { OutOfRange, oneOf, within } from './range.ts'
import { dayNumber } from './span.ts'
import { STORAGES, YEAST_FORMS, type Storage, type YeastForm } from './vocabulary.ts'

const GAS_J_PER_MOL_K = 8.314462
const DAYS_PER_YEAR = 365.25
const DAYS_PER_MONTH = DAYS_PER_YEAR / 12

/** How many times faster yeast dies at a temperature than at 20 °C. */
function arrhenius(temperatureC: number, referenceC: number): number {
  const inverse = 1 / (temperatureC + 273.15) - 1 / (referenceC + 273.15)
  return Math.exp((-DRY_ACTIVATION_J_PER_MOL / GAS_J_PER_MOL_K) * inverse)
}

/**
 * Share of sealed dry yeast still alive, against the day it was packed.
 *
 * @param years since then, 0 to 30
 * @param temperatureC of the store, -20 to 30 °C; above, the dry grain softens and this model no longer holds
 * @returns 0 to 1
 * @throws RangeError outside those ranges
 * Source: a default chosen between weak sources (0.22 a year at 20 °C, 60 kJ/mol). Two years at 4 °C leave 0.90.
 */
export function drySurvival({ years, temperatureC }: { years: number; temperatureC: number }): number {
  within('years', years, 0, 30)
  within('temperatureC', temperatureC, -20, DRY_MODEL_TOP_C)
  return Math.exp(-DRY_LOSS_PER_YEAR_20C * years * arrhenius(temperatureC, 20))
}

/** Loss per day (a rate of the logarithm), sealed, in one place. */
function dailyLoss(form: YeastForm, storage: Storage): number {
  const temperatureC = STORAGE_C[storage]
  const perMonth = -Math.log(1 - LIQUID_LOSS_PER_MONTH_4C)
  switch (form) {
    case 'dry':
      return (DRY_LOSS_PER_YEAR_20C * arrhenius(temperatureC, 20)) / DAYS_PER_YEAR
    case 'liquid':
      return (perMonth * arrhenius(temperatureC, 4)) / DAYS_PER_MONTH
    case 'slurry':
      return (SLURRY_FACTOR * perMonth * arrhenius(temperatureC, 4)) / DAYS_PER_MONTH
  }
}

export interface StoragePeriod {
  from: string
  storage: Storage
}

export interface PacketFacts {
  form: YeastForm
  madeOn?: string | null
  bestBefore?: string | null
  openedOn?: string | null
  storage: Storage | readonly StoragePeriod[]
  on: string
}

/** One thing that moved the estimate. */
export interface Factor {
  text: string
  effect: 'lowers' | 'raises' | 'little'
}

export interface Viability {
  estimate: number
  low: number
  high: number
  reasons: string[]
  factors: Factor[]
}

/** Stretches of one storage, in day numbers, from packing to `on`. */
function stretches(storage: PacketFacts['storage'], made: number, on: number) {
  if (typeof storage === 'string') {
    return [{ from: made, to: on, storage: oneOf('storage', storage, STORAGES) }]
  }
  if (storage.length === 0) {
    throw new OutOfRange('storage', storage, undefined, undefined, 'at least one place is needed')
  }
  const moves = storage
    .map((move, index) => ({
      from: dayNumber(`storage[${index}].from`, move.from),
      storage: oneOf(`storage[${index}].storage`, move.storage, STORAGES),
    }))
    .sort((a, b) => a.from - b.from)
  return moves
    .map((move, index) => ({
      // What came before the first move is taken to have been the same place.
      from: index === 0 ? made : Math.max(made, move.from),
      to: Math.min(on, moves[index + 1]?.from ?? on),
      storage: move.storage,
    }))
    .filter((part) => part.to > part.from)
}

function packedDay(facts: PacketFacts, on: number): { made: number; known: boolean } {
  if (facts.madeOn) {
    const made = dayNumber('madeOn', facts.madeOn)
    if (made > on)
      throw new OutOfRange('madeOn', facts.madeOn, undefined, undefined, `allowed up to ${facts.on}`)
    if (facts.bestBefore && dayNumber('bestBefore', facts.bestBefore) < made) {
      throw new OutOfRange(
        'bestBefore',
        facts.bestBefore,
        undefined,
        undefined,
        `allowed from ${facts.madeOn}`,
      )
    }
    return { made, known: true }
  }
  if (!facts.bestBefore) {
    throw new OutOfRange(
      'bestBefore',
      facts.bestBefore,
      undefined,
      undefined,
      'madeOn or bestBefore is needed',
    )
  }
  const before = dayNumber('bestBefore', facts.bestBefore)
  return { made: Math.min(on, before - SHELF_LIFE_MONTHS[facts.form] * DAYS_PER_MONTH), known: false }
}

/**
 * How much of a packet is still alive, from its age and how it was kept.
 *
 * @param form `dry`, `liquid` or `slurry`
 * @param madeOn day it was packed; without it, best-before less the usual shelf life (24, 6 or 1 months)
 * @param bestBefore day on the pack
 * @param openedOn day it was first opened, if it was
 * @param storage `freezer`, `fridge` or `shelf` (-18, 4, 20 °C), or a list of `{ from, storage }` where it was moved
 * @param on the day that is asked about
 * @returns share alive against the day it was packed, 0 to 1, with a band of about 80 % across lots, and why
 * @throws RangeError for what is no day, a day out of order, or an unknown word
 * Source: the storage model of `drySurvival`; opened packs lose ten times as fast; liquid yeast 22.5 % a month at 4 °C
 * (both from memory). Packets of one lot share more than their age: see `lotBelief`.
 */
export function packetViability(facts: PacketFacts): Viability {
  const form = oneOf('form', facts.form, YEAST_FORMS)
  const on = dayNumber('on', facts.on)
  const { made, known } = packedDay(facts, on)
  const opened = facts.openedOn ? dayNumber('openedOn', facts.openedOn) : Number.POSITIVE_INFINITY
  if (known && opened < made) {
    throw new OutOfRange('openedOn', facts.openedOn, undefined, undefined, `allowed from ${facts.madeOn}`)
  }
  const parts = stretches(facts.storage, made, on)
  let sealedLoss = 0
  let openedLoss = 0
  let frozenWet = false
  for (const part of parts) {
    const rate = dailyLoss(form, part.storage)
    const closedUntil = Math.min(part.to, Math.max(part.from, opened))
    sealedLoss += rate * (closedUntil - part.from)
    openedLoss += rate * OPENED_FACTOR * (part.to - closedUntil)
    if (form !== 'dry' && part.storage === 'freezer') frozenWet = true
  }
  const loss = sealedLoss + openedLoss
  const frozen = frozenWet ? FROZEN_WET_SURVIVAL : 1
  const openedShare = loss > 0 ? openedLoss / loss : 0
  const spread = Math.hypot(LOT_SPREAD, openedShare * OPENED_FACTOR_SPREAD, known ? 0 : 0.2)
  const factors = viabilityFactors(facts, { form, on, made, known, opened, openedLoss, frozenWet, parts })
  return {
    estimate: frozen * Math.exp(-loss),
    low: frozen * (1 - FRESH_SHORTFALL) * Math.exp(-loss * Math.exp(Z80 * spread)),
    high: Math.min(1, frozen * (frozenWet ? 6 : 1) * Math.exp(-loss * Math.exp(-Z80 * spread))),
    reasons: factors.map((factor) => factor.text),
    factors,
  }
}

function viabilityFactors(
  facts: PacketFacts,
  state: {
    form: YeastForm
    on: number
    made: number
    known: boolean
    opened: number
    openedLoss: number
    frozenWet: boolean
    parts: readonly { from: number; to: number; storage: Storage }[]
  },
): Factor[] {
  const factors: Factor[] = []
  const months = Math.round((state.on - state.made) / DAYS_PER_MONTH)
  const age =
    months < 1 ? 'Packed this month' : `Packed about ${months} ${months === 1 ? 'month' : 'months'} ago`
  const few = state.form === 'dry' ? 9 : 1
  factors.push({
    text: state.known ? age : `${age}, judged by its best-before day`,
    effect: months > few ? 'lowers' : 'little',
  })
  if (facts.bestBefore && dayNumber('bestBefore', facts.bestBefore) < state.on) {
    factors.push({ text: 'Past its best-before day', effect: 'lowers' })
  }
  for (const place of STORAGES) {
    const days = state.parts
      .filter((part) => part.storage === place)
      .reduce((sum, p) => sum + p.to - p.from, 0)
    if (days > 0) factors.push(placeFactor(place, days, state.parts.length === 1, state.form))
  }
  if (state.opened < state.on) {
    const days = state.on - state.opened
    factors.push({ text: `Open for ${days} ${days === 1 ? 'day' : 'days'}`, effect: 'lowers' })
  } else if (state.form === 'dry') {
    factors.push({ text: 'Still sealed', effect: 'raises' })
  }
  if (state.frozenWet) factors.push({ text: 'Frozen wet: ice breaks most cells', effect: 'lowers' })
  return factors
}

function placeFactor(place: Storage, days: number, always: boolean, form: YeastForm): Factor {
  const months = Math.max(1, Math.round(days / DAYS_PER_MONTH))
  const span = always ? 'Kept' : `About ${months} ${months === 1 ? 'month' : 'months'}`
  switch (place) {
    case 'freezer':
      return { text: `${span} in the freezer`, effect: form === 'dry' ? 'raises' : 'lowers' }
    case 'fridge':
      return { text: `${span} in the fridge`, effect: form === 'dry' ? 'raises' : 'little' }
    case 'shelf':
      return { text: `${span} on the shelf at room temperature`, effect: days > 30 ? 'lowers' : 'little' }
  }
}
