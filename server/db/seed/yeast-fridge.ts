import type { DrinkUse, Storage, YeastForm } from '#shared/brewing/vocabulary'
import type { BatchStyle } from '#shared/batches/vocabulary'
import type { AmountUnit, Outcome } from '#shared/yeast/vocabulary'

export interface SeedPacket {
  key: string
  by: string
  strain: string
  form: YeastForm
  use: DrinkUse
  lotCode?: string
  madeDaysAgo?: number
  bestBeforeInDays?: number
  openedDaysAgo?: number
  addedDaysAgo: number
  storage: Storage
  moved?: { daysAgo: number; storage: Storage }
  unit?: AmountUnit
  initial: number
  left?: number
  shared?: boolean
  place?: string
  note?: string
  thrownAwayDaysAgo?: number
}

const fallow = { strain: 'Fallow 71', form: 'dry', use: 'mead', storage: 'fridge' } as const
const sallow = {
  strain: 'Sallow 9',
  form: 'dry',
  use: 'wine',
  lotCode: 'S9-0331',
  storage: 'fridge',
} as const

/** Fifteen packets, in every state a packet can be in. */
export const FRIDGE: SeedPacket[] = [
  {
    ...fallow,
    ...{
      key: 'fallow-open',
      by: 'member',
      lotCode: 'F71-0924',
      place: 'Top shelf',
      initial: 11.5,
      left: 7.4,
    },
    ...{ madeDaysAgo: 500, bestBeforeInDays: 17, openedDaysAgo: 147, addedDaysAgo: 320 },
  },
  {
    ...fallow,
    ...{ key: 'fallow-spent', by: 'steward', lotCode: 'F71-0924', place: 'Top shelf', initial: 11.5 },
    ...{ madeDaysAgo: 500, bestBeforeInDays: 17, addedDaysAgo: 330 },
  },
  {
    ...fallow,
    ...{ key: 'fallow-new', by: 'member2', lotCode: 'F71-1207', place: 'Top shelf', initial: 5 },
    ...{ madeDaysAgo: 70, bestBeforeInDays: 650, addedDaysAgo: 40 },
  },
  {
    ...{ key: 'hobthrush', by: 'steward', strain: 'Hobthrush', form: 'dry', use: 'wine', storage: 'fridge' },
    ...{ lotCode: 'HT 2218', madeDaysAgo: 210, bestBeforeInDays: 520, addedDaysAgo: 150, initial: 8 },
    place: 'Door',
  },
  {
    ...{ key: 'marram', by: 'member3', strain: 'Marram White', form: 'dry', use: 'wine', storage: 'shelf' },
    ...{ lotCode: 'MW-17', madeDaysAgo: 760, bestBeforeInDays: -30, openedDaysAgo: 330, addedDaysAgo: 340 },
    ...{ initial: 5, left: 3.8, place: 'Spice rack by the door' },
    note: 'Found behind the labels.',
  },
  {
    ...{ key: 'oxlip', by: 'member5', strain: 'Oxlip', form: 'dry', use: 'cider', storage: 'shelf' },
    ...{ lotCode: 'OX-4471', madeDaysAgo: 400, bestBeforeInDays: 330, openedDaysAgo: 200, addedDaysAgo: 215 },
    ...{ initial: 7, left: 4.5 },
  },
  {
    ...{ key: 'oxlip-own', by: 'member', strain: 'Oxlip', form: 'dry', use: 'cider', storage: 'fridge' },
    ...{ lotCode: 'OX-4502', bestBeforeInDays: 9, addedDaysAgo: 180, initial: 7, shared: false },
    place: 'Door, my box',
  },
  {
    ...{ key: 'lowmere', by: 'member8', strain: 'Lowmere', form: 'liquid', use: 'ale', storage: 'fridge' },
    ...{ lotCode: 'LM 0811', madeDaysAgo: 62, bestBeforeInDays: 120, addedDaysAgo: 30 },
    ...{ unit: 'ml', initial: 110, place: 'Middle shelf' },
  },
  {
    ...{
      key: 'lowmere-old',
      by: 'steward2',
      strain: 'Lowmere',
      form: 'liquid',
      use: 'ale',
      storage: 'fridge',
    },
    ...{ lotCode: 'LM 0207', madeDaysAgo: 230, bestBeforeInDays: -48, addedDaysAgo: 200 },
    ...{ unit: 'ml', initial: 110, place: 'Middle shelf' },
  },
  {
    ...{ key: 'bracken', by: 'member7', strain: 'Bracken', form: 'dry', use: 'lager', storage: 'fridge' },
    ...{ lotCode: 'BRK-90', madeDaysAgo: 420, bestBeforeInDays: 310, openedDaysAgo: 38, addedDaysAgo: 300 },
    ...{ moved: { daysAgo: 38, storage: 'shelf' }, initial: 11.5, left: 11.5 },
    note: 'Left out after the open evening.',
  },
  {
    ...{ key: 'garth', by: 'member4', strain: 'Garth, from the autumn cyser', form: 'slurry', use: 'cider' },
    ...{ storage: 'fridge', madeDaysAgo: 12, addedDaysAgo: 12, unit: 'ml', initial: 300, left: 300 },
    ...{ place: 'Bottom shelf, jar with a red lid' },
  },
  {
    ...sallow,
    ...{ key: 'sallow', by: 'member4', madeDaysAgo: 380, bestBeforeInDays: 350, addedDaysAgo: 120 },
    ...{ initial: 5, place: 'Door' },
  },
  {
    ...sallow,
    ...{ key: 'sallow-second', by: 'steward2', madeDaysAgo: 380, bestBeforeInDays: 350, addedDaysAgo: 120 },
    ...{ initial: 5, place: 'Door' },
  },
  {
    ...{ key: 'pipkin', by: 'member6', strain: 'Pipkin', form: 'dry', use: 'other', storage: 'fridge' },
    ...{ lotCode: 'PK-3', madeDaysAgo: 300, bestBeforeInDays: 400, addedDaysAgo: 140, initial: 10 },
  },
  {
    ...{ key: 'windle', by: 'member9', strain: 'Windle 40', form: 'dry', use: 'wine', storage: 'freezer' },
    ...{ lotCode: 'W40-55', madeDaysAgo: 540, bestBeforeInDays: 190, addedDaysAgo: 260, initial: 5 },
    place: 'Freezer drawer',
  },
  {
    ...{
      key: 'hobthrush-damp',
      by: 'member',
      strain: 'Hobthrush',
      form: 'dry',
      use: 'wine',
      storage: 'fridge',
    },
    ...{ lotCode: 'HT 1990', madeDaysAgo: 600, bestBeforeInDays: -5, openedDaysAgo: 200, addedDaysAgo: 250 },
    ...{ initial: 8, left: 2.5, thrownAwayDaysAgo: 6 },
  },
]

interface SeedPitch {
  packet: string
  by: string
  daysAgo: number
  grams?: number
  ml?: number
  mustTemperatureC?: number
  batch: { name: string; style: BatchStyle; volumeLitres: number; og?: number }
  /** The batch is drunk by now. */
  over?: boolean
  /** Left out: nobody has said yet. */
  outcome?: { outcome: Outcome; hours?: number }
}

const demijohn = (name: string, style: BatchStyle, og: number) => ({ name, style, volumeLitres: 4.5, og })
const started = (hours: number) => ({ outcome: { outcome: 'started' as const, hours } })
const slow = (hours: number) => ({ outcome: { outcome: 'slow' as const, hours } })
const none = { outcome: { outcome: 'none' as const, hours: 96 } }

/** What the lots have done, oldest first. */
export const PAST_PITCHES: SeedPitch[] = [
  {
    packet: 'fallow-spent',
    by: 'member5',
    daysAgo: 300,
    grams: 2.1,
    over: true,
    batch: demijohn('Bramble mead', 'mead', 1.086),
    ...started(9),
  },
  {
    packet: 'fallow-spent',
    by: 'member7',
    daysAgo: 260,
    grams: 2,
    over: true,
    batch: demijohn('Plain mead', 'mead', 1.084),
    ...started(12),
  },
  {
    packet: 'fallow-spent',
    by: 'steward',
    daysAgo: 220,
    grams: 2.4,
    over: true,
    batch: demijohn('Elderflower mead', 'mead', 1.08),
    ...started(11),
  },
  {
    packet: 'fallow-spent',
    by: 'member2',
    daysAgo: 190,
    grams: 2.5,
    over: true,
    batch: demijohn('Spring cyser', 'cyser', 1.078),
    ...started(12),
  },
  {
    packet: 'fallow-spent',
    by: 'member9',
    daysAgo: 170,
    grams: 2.5,
    over: true,
    mustTemperatureC: 13,
    batch: demijohn('Cellar mead', 'mead', 1.09),
    ...slow(31),
  },
  {
    packet: 'fallow-open',
    by: 'member',
    daysAgo: 147,
    grams: 2.1,
    over: true,
    batch: demijohn('Quince cyser', 'cyser', 1.08),
    ...started(14),
  },
  {
    packet: 'pipkin',
    by: 'member6',
    daysAgo: 130,
    grams: 2,
    over: true,
    batch: demijohn('Beetroot wine', 'wine', 1.085),
    ...none,
  },
  {
    packet: 'pipkin',
    by: 'member10',
    daysAgo: 110,
    grams: 2.5,
    over: true,
    batch: demijohn('Nettle wine', 'wine', 1.08),
    ...none,
  },
  {
    packet: 'hobthrush',
    by: 'member3',
    daysAgo: 90,
    grams: 2,
    over: true,
    batch: demijohn('Rhubarb wine', 'wine', 1.088),
    ...started(10),
  },
  {
    packet: 'sallow',
    by: 'member4',
    daysAgo: 60,
    grams: 1.5,
    batch: demijohn('Gooseberry wine', 'wine', 1.085),
    ...none,
  },
  {
    packet: 'sallow',
    by: 'member8',
    daysAgo: 25,
    grams: 1.5,
    batch: demijohn('Plum wine', 'wine', 1.09),
    ...none,
  },
  {
    packet: 'garth',
    by: 'member11',
    daysAgo: 8,
    ml: 60,
    batch: demijohn('Late windfall cider', 'cider', 1.052),
    ...started(7),
  },
  {
    packet: 'fallow-open',
    by: 'member',
    daysAgo: 1.25,
    grams: 2.1,
    batch: demijohn('Hedgerow melomel', 'melomel', 1.084),
  },
]

/** Lots a steward took out of use. */
export const WITHDRAWN = [
  {
    packet: 'pipkin',
    by: 'steward',
    daysAgo: 90,
    note: 'Two dead of two, from different shelves. Do not pitch it.',
  },
]
