import type { GravityReading } from '#shared/brewing/index'
import type { GravityUnit } from '#shared/units/gravity'
import type { TemperatureUnit } from '#shared/units/temperature'
import type { VolumeUnit } from '#shared/units/volume'
import type { GateCheck } from '@/components/base/gate-check'
import type { IconName } from '@/components/base/icons'
import type { Tone } from '@/components/base/states'

/** When a question comes up, in the order of a batch. */
export const MOMENTS = ['before', 'pitching', 'working', 'bottling', 'cleaning'] as const
export type Moment = (typeof MOMENTS)[number]

export const MOMENT_NAMES: Record<Moment, string> = {
  before: 'Before you start',
  pitching: 'Pitching',
  working: 'While it works',
  bottling: 'Bottling',
  cleaning: 'Cleaning',
}

export interface Units {
  gravity: GravityUnit
  volume: VolumeUnit
  temperature: TemperatureUnit
}

export type Quantity = keyof Units

interface Common {
  /** Name in the address, and of the function's argument where it has one. */
  key: string
  label: string
  hint?: string
  optional?: boolean
  /** Further argument names whose errors belong beside this field. */
  guards?: readonly string[]
  /** Asked only where another field holds something else than this. */
  unless?: { key: string; is: string }
}

export interface NumberAsk extends Common {
  kind: 'number'
  /** A quantity follows the unit chosen; anything else carries its own. */
  quantity?: Quantity
  unit?: string
  decimals?: number
  start?: number
  /** What is typed, for one of the function's own units: 100 where a share is typed as per cent. */
  scale?: number
}

export interface ChoiceAsk extends Common {
  kind: 'choice'
  options: readonly { value: string; label: string }[]
  start: string
  /** Long lists fold into a select. */
  long?: boolean
}

export interface DayAsk extends Common {
  kind: 'day'
  start?: 'today'
}

export interface LinesAsk extends Common {
  kind: 'lines'
  start: string
}

export interface ReadingsAsk extends Common {
  kind: 'readings'
}

export type Ask = NumberAsk | ChoiceAsk | DayAsk | LinesAsk | ReadingsAsk

/** One ingredient of a must, as typed: its name in the table and grams. */
export interface TypedLine {
  ingredient: string
  grams: number | undefined
}

export interface TypedReading {
  on: string
  gravity: number | undefined
}

/** What has been filled in, in litres, °C and specific gravity. */
export interface Given {
  /** A number that the question needs; it is not asked for an answer before it is there. */
  number: (key: string) => number
  maybe: (key: string) => number | undefined
  word: (key: string) => string
  day: (key: string) => string | undefined
  lines: (key: string) => { ingredient: string; grams: number }[]
  readings: (key: string) => GravityReading[]
  today: string
}

/** Writes quantities in the units chosen, to no more places than they are worth. */
export interface Show {
  gravity: (sg: number) => string
  gravityFigure: (sg: number) => { text: string; unit: string }
  volume: (litres: number) => string
  temperature: (celsius: number) => string
  temperatures: (lowC: number, highC: number) => string
}

export interface Answer {
  /** The one number, and its unit. */
  figure?: { text: string; unit: string }
  /** Or the one word. */
  word?: { text: string; icon: IconName; tone: Tone }
  sentence: string
  facts?: { label: string; value: string }[]
  acts?: { act: string; more?: string }[]
  checks?: GateCheck[]
  notes?: string[]
}

export interface Question {
  id: string
  moment: Moment
  title: string
  /** What it answers, in a line. */
  lead: string
  asks: readonly Ask[]
  answer: (given: Given, show: Show) => Answer
  how: { formula: readonly string[]; source: string; range: string }
  cautions?: readonly { caution: string; why: string }[]
}
