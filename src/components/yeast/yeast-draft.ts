import type { DrinkUse, Storage, YeastForm } from '#shared/brewing/vocabulary'
import type { Packet, PacketPatch, Strain } from '#shared/yeast/contract'
import { initialOf, remainingOf } from './yeast-words.ts'

/** A packet as its form holds it: days and words are empty texts until somebody writes them. */
export interface PacketDraft {
  strain: string
  form: YeastForm
  use: DrinkUse | ''
  lotCode: string
  madeOn: string
  bestBefore: string
  openedOn: string
  storage: Storage
  movedOn: string
  initial: number | undefined
  remaining: number | undefined
  shared: boolean
  place: string
  note: string
}

/** Common sizes, so that most need no typing: a sachet, a vial, a jar. */
export const USUAL_AMOUNT: Record<YeastForm, number> = { dry: 5, liquid: 35, slurry: 250 }

export const emptyDraft = (today: string): PacketDraft => ({
  strain: '',
  form: 'dry',
  use: '',
  lotCode: '',
  madeOn: '',
  bestBefore: '',
  openedOn: '',
  storage: 'fridge',
  movedOn: today,
  initial: USUAL_AMOUNT.dry,
  remaining: undefined,
  shared: true,
  place: '',
  note: '',
})

/** A fresh packet of a strain that was here before: all but lot and dates. */
export const draftLike = (
  draft: PacketDraft,
  { strain, form, use, initial, storage, shared }: Strain,
): PacketDraft => ({
  ...draft,
  ...{ strain, form, use, initial, storage, shared },
})

export const draftOf = (packet: Packet, today: string): PacketDraft => ({
  ...{
    strain: packet.strain,
    form: packet.form,
    use: packet.use,
    storage: packet.storage,
    shared: packet.shared,
  },
  lotCode: packet.lotCode ?? '',
  madeOn: packet.madeOn ?? '',
  bestBefore: packet.bestBefore ?? '',
  openedOn: packet.openedOn ?? '',
  movedOn: today,
  initial: initialOf(packet),
  remaining: remainingOf(packet),
  place: packet.place ?? '',
  note: packet.note,
})

/** The request for a new packet, to be checked by its schema. */
export function requestOf(draft: PacketDraft, unit: 'g' | 'ml'): Record<string, unknown> {
  const { initial, remaining, movedOn: _moved, madeOn, bestBefore, openedOn, lotCode, place, ...rest } = draft
  const written = Object.fromEntries(
    Object.entries({ madeOn, bestBefore, openedOn, lotCode, place }).filter(([, text]) => text.trim() !== ''),
  )
  return {
    ...rest,
    ...written,
    ...(initial !== undefined && { [unit === 'g' ? 'initialGrams' : 'initialMl']: initial }),
    ...(remaining !== undefined && { [unit === 'g' ? 'remainingGrams' : 'remainingMl']: remaining }),
  }
}

/** Only what was changed; what was emptied is cleared. */
export function patchOf(
  draft: PacketDraft,
  packet: Packet,
  today: string,
): Record<keyof PacketPatch, unknown> {
  const before = draftOf(packet, today)
  const changed = (key: keyof PacketDraft) => draft[key] !== before[key]
  const patch: Record<string, unknown> = {}
  for (const key of ['strain', 'use', 'shared', 'note'] as const) if (changed(key)) patch[key] = draft[key]
  for (const key of ['lotCode', 'madeOn', 'bestBefore', 'openedOn', 'place'] as const)
    if (changed(key)) patch[key] = draft[key].trim() === '' ? null : draft[key]
  if (changed('storage')) Object.assign(patch, { storage: draft.storage, movedOn: draft.movedOn })
  if (changed('remaining'))
    patch[packet.initialGrams === null ? 'remainingMl' : 'remainingGrams'] = draft.remaining
  return patch
}
