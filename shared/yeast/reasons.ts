import { drySurvival } from '../brewing/vitality.ts'
import { STORAGE_C } from '../brewing/judgement.ts'
import type { Storage } from '../brewing/vocabulary.ts'
import { type CalendarDay, addDays, daysBetween } from '../time/day.ts'
import { dayInWords } from '../time/day-words.ts'
import { dateState } from './dates.ts'
import { NOTABLE_SHARE } from './judgement.ts'
import { type Evidence, type LotStanding } from './lot-evidence.ts'
import type { PacketFacts } from './survival.ts'
import type { Effect, LotState } from './vocabulary.ts'
import { agoWords, capital, numberWord, spanWords } from './words.ts'

/** One thing the answer rests on: what is so, why it matters, and which way it moves the estimate. */
export interface Reason {
  text: string
  why: string
  effect: Effect
}

interface Known {
  packet: PacketFacts
  on: CalendarDay
  evidence: Evidence
  standing: LotStanding
  lot: { state: LotState; note: string | null }
}

/** Every reason behind an estimate, heaviest kind first: opening, place, the lot, age, the date on the pack. */
export function viabilityReasons(known: Known): Reason[] {
  const { packet, on } = known
  return [
    ...lotStateReasons(known.lot),
    openingReason(packet, on),
    ...storageReasons(packet, on),
    ...(packet.madeOn ? [ageReason(packet, packet.madeOn, on)] : []),
    lotReason(known),
    ...dateReasons(packet, on),
  ]
}

function openingReason({ form, openedOn }: PacketFacts, on: CalendarDay): Reason {
  if (openedOn && openedOn <= on) {
    const fresh = daysBetween(openedOn, on) < 7
    return {
      text: `Opened ${dayInWords(openedOn, 'date')}, ${agoWords(openedOn, on)}.`,
      why: fresh ? 'Not long enough to matter much.' : 'Air and damp cost the most.',
      effect: fresh ? 'changes-little' : 'lowers',
    }
  }
  switch (form) {
    case 'dry':
      return { text: 'Still sealed.', why: 'No air or damp has reached it.', effect: 'raises' }
    case 'liquid':
      return { text: 'Still sealed.', why: 'Liquid yeast ages all the same.', effect: 'changes-little' }
    case 'slurry':
      return {
        text: 'Harvested from a ferment.',
        why: 'Spent cells die faster than fresh ones.',
        effect: 'lowers',
      }
  }
}

interface Stay {
  storage: Storage
  days: number
  since: CalendarDay
}

/** Where it has been up to a day, oldest first. Before the first record it is taken to have been in the same place. */
function stays({ storage, madeOn }: PacketFacts, on: CalendarDay): Stay[] {
  return storage
    .map((move, index) => {
      const since = index === 0 ? (madeOn ?? move.from) : move.from
      const until = storage[index + 1]?.from ?? on
      return { storage: move.storage, since, days: daysBetween(since, until < on ? until : on) }
    })
    .filter((stay, index) => stay.days > 0 || (index === 0 && storage.length === 1))
}

function storageReasons(packet: PacketFacts, on: CalendarDay): Reason[] {
  const all = stays(packet, on)
  const only = all.every(({ storage }) => storage === all[0]?.storage)
  if (only) {
    const place = (all[0] ?? packet.storage[0])?.storage ?? 'fridge'
    return [{ text: `Kept ${IN[place]} throughout.`, ...placeEffect(packet, place) }]
  }
  return all.slice(-3).map(({ storage, days, since }, index, shown) => ({
    text:
      index === shown.length - 1
        ? `${capital(IN[storage])} since ${dayInWords(since, 'date')}, ${spanWords(days)}.`
        : `${capital(IN[storage])} for ${spanWords(days)} before that.`,
    ...placeEffect(packet, storage),
  }))
}

export const IN: Record<Storage, string> = {
  freezer: 'in the freezer',
  fridge: 'in the fridge',
  shelf: 'on the shelf',
}

function placeEffect({ form }: PacketFacts, storage: Storage): Omit<Reason, 'text'> {
  if (storage === 'shelf') return { why: 'Warmth ages yeast.', effect: 'lowers' }
  if (form === 'dry')
    return {
      why: `${capital(numberWord(timesSlower(storage)))} times slower than on a warm shelf.`,
      effect: 'raises',
    }
  return storage === 'freezer'
    ? { why: 'Ice breaks most wet cells.', effect: 'lowers' }
    : { why: 'The best place for it.', effect: 'raises' }
}

/** How many times longer dry yeast keeps in a place than at room temperature, by the storage model. */
function timesSlower(storage: Storage): number {
  const loss = (temperatureC: number) => -Math.log(drySurvival({ years: 1, temperatureC }))
  return Math.round(loss(STORAGE_C.shelf) / loss(STORAGE_C[storage]))
}

function ageReason({ form }: PacketFacts, madeOn: CalendarDay, on: CalendarDay): Reason {
  const days = daysBetween(madeOn, on)
  const young = days < { dry: 270, liquid: 30, slurry: 7 }[form]
  return {
    text: `${form === 'slurry' ? 'Harvested' : 'Made'} ${agoWords(madeOn, on)}.`,
    why: young ? 'Young enough.' : 'Every month takes its share.',
    effect: young ? 'changes-little' : 'lowers',
  }
}

function dateReasons(packet: PacketFacts, on: CalendarDay): Reason[] {
  const { bestBefore, madeOn } = packet
  if (!bestBefore) return []
  const assumed = madeOn
    ? 'The date is not a cliff.'
    : 'Its age is judged by this date, as nobody wrote when it was made.'
  const days = daysBetween(on, bestBefore)
  const when =
    dateState(packet, on) === 'past'
      ? `${spanWords(-days)} ago`
      : days === 0
        ? 'today'
        : `in ${spanWords(days)}`
  return [
    {
      text: `Best before ${days < 0 && days > -2 ? 'yesterday' : when}.`,
      why: assumed,
      effect: days < 0 && !madeOn ? 'lowers' : 'changes-little',
    },
  ]
}

function lotReason({ evidence, standing }: Known): Reason {
  const { started, slow, none } = evidence
  const reported = started + slow + none
  if (reported === 0)
    return {
      text: 'Nobody has reported on this lot yet.',
      why: 'Yours will be the first.',
      effect: 'changes-little',
    }
  const effect: Effect =
    standing.factor > 1 + NOTABLE_SHARE
      ? 'raises'
      : standing.factor < 1 - NOTABLE_SHARE
        ? 'lowers'
        : 'changes-little'
  const of = `of ${numberWord(reported)} ${reported === 1 ? 'pitch' : 'pitches'} from this lot`
  if (none > 0)
    return {
      text: `${capital(numberWord(none))} ${of} never started.`,
      why: standing.dead > 0.3 ? 'The lot may well be dead.' : 'A start since then speaks for it.',
      effect,
    }
  return {
    text: `${capital(numberWord(started))} ${of} started on time.`,
    why:
      effect !== 'lowers'
        ? 'The lot looks sound.'
        : slow > 0
          ? `${slow === 1 ? 'The slow one counts' : 'The slow ones count'} against it.`
          : 'They took longer than sound yeast does.',
    effect,
  }
}

function lotStateReasons({ state, note }: Known['lot']): Reason[] {
  switch (state) {
    case 'sound':
      return []
    case 'flagged':
      return [
        {
          text: 'This lot is flagged.',
          why: 'It failed twice. A steward is to look at it.',
          effect: 'lowers',
        },
      ]
    case 'withdrawn':
      return [
        { text: 'A steward withdrew this lot.', why: note ?? 'It is not to be pitched.', effect: 'lowers' },
      ]
  }
}

/** The one line of the fridge list: `Opened 200 days ago, kept on the shelf`. */
export function fridgeReason(packet: PacketFacts, on: CalendarDay): string {
  const place = storageOn(packet, on)
  const at = `kept ${IN[place.storage]}`
  const moved = packet.storage.length > 1 && place.from > addDays(on, -60)
  const where = moved ? `${at} since ${dayInWords(place.from, 'date')}` : at
  if (packet.openedOn && packet.openedOn <= on) {
    const days = daysBetween(packet.openedOn, on)
    return `Opened ${days === 0 ? 'today' : days === 1 ? 'yesterday' : `${days} days ago`}, ${where}`
  }
  if (packet.form === 'slurry' && packet.madeOn) return `Harvested ${agoWords(packet.madeOn, on)}, ${where}`
  return `Sealed, ${where}`
}

/** Where a packet is on a day: the last record up to then, else the first. */
export function storageOn({ storage }: Pick<PacketFacts, 'storage'>, on: CalendarDay) {
  const place = storage.findLast(({ from }) => from <= on) ?? storage[0]
  if (!place) throw new RangeError('storage is empty: at least one place is needed')
  return place
}
