import type { DrinkUse, Storage, YeastForm } from '#shared/brewing/vocabulary'
import { amountText } from '#shared/yeast/amount'
import type { Packet } from '#shared/yeast/contract'
import type { AmountUnit, Outcome, Verdict } from '#shared/yeast/vocabulary'
import type { StateName } from '@/components/base/states'

export const FORM_WORDS: Record<YeastForm, string> = { dry: 'Dry', liquid: 'Liquid', slurry: 'Harvested' }

export const USE_WORDS: Record<DrinkUse, string> = {
  wine: 'Wine',
  mead: 'Mead',
  cider: 'Cider',
  ale: 'Ale',
  lager: 'Lager',
  other: 'Other',
}

export const STORAGE_WORDS: Record<Storage, string> = {
  freezer: 'Freezer',
  fridge: 'Fridge',
  shelf: 'Shelf',
}

export const OUTCOME_WORDS: Record<Outcome, string> = {
  started: 'Started',
  slow: 'Slow',
  none: 'Never started',
}

export const VERDICT_STATE: Record<Verdict, StateName> = {
  good: 'yeast-good',
  'pitch-more': 'yeast-pitch-more',
  'prove-first': 'yeast-prove-first',
  'do-not-rely': 'yeast-do-not-rely',
}

/** `{ good: [...] }` as options of a choice. */
export const optionsOf = <K extends string>(words: Record<K, string>) =>
  (Object.entries(words) as [K, string][]).map(([value, label]) => ({ value, label }))

export const unitWord = (unit: AmountUnit) => (unit === 'g' ? 'g' : 'mL')

export const unitOf = (packet: Pick<Packet, 'initialGrams'>): AmountUnit =>
  packet.initialGrams === null ? 'ml' : 'g'

/** `3.2 g`. */
export const amountOf = (amount: number, unit: AmountUnit) => `${amountText(amount)} ${unitWord(unit)}`

type Amounts = Pick<Packet, 'initialGrams' | 'initialMl' | 'remainingGrams' | 'remainingMl'>
export const remainingOf = (packet: Amounts) => packet.remainingGrams ?? packet.remainingMl ?? 0
export const initialOf = (packet: Amounts) => packet.initialGrams ?? packet.initialMl ?? 0

/** `Dry yeast for mead`, `Harvested yeast for cider`. */
export const kindOf = ({ form, use }: Pick<Packet, 'form' | 'use'>) =>
  `${FORM_WORDS[form]} yeast${use === 'other' ? '' : ` for ${USE_WORDS[use].toLowerCase()}`}`

/** Whole per cents of a share. */
export const percent = (share: number) => Math.round(share * 100)
