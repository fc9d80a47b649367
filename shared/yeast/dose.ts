import { type PitchAdvice, pitchAdvice } from '../brewing/pitch.ts'
import type { YeastForm } from '../brewing/vocabulary.ts'
import { type CalendarDay } from '../time/day.ts'
import { addMinutes, instantOn, type Instant } from '../time/instant.ts'
import { amountText } from './amount.ts'
import { TOO_HOT_FOR_YEAST_C, USUAL_PITCH_HOUR } from './judgement.ts'
import type { Alive, PacketFacts } from './survival.ts'
import type { AmountUnit } from './vocabulary.ts'

export interface Step {
  title: string
  text: string
}

/** How much to pitch, how, and what to expect. */
export interface Dose {
  unit: AmountUnit
  /** In `unit`; of wet yeast a gram is read as a millilitre. */
  grams: number
  low: number
  high: number
  /** What is left reaches the low end of the range. */
  enough: boolean
  /** Null for yeast that is wet already. */
  rehydrationMl: number | null
  rehydrationTemperatureC: { low: number; high: number } | null
  steps: Step[]
  expectedHours: { early: number; likely: number; late: number }
  worryAfterHours: number
  ifNothingBy: Instant
  ifNothing: string
  cellsPerMl: number
}

export interface Must {
  volumeLitres: number
  og: number
}

/**
 * The pitch plan for a packet and a must. Hours and water are those of the dose, or of what is left when that is less.
 * @throws RangeError as `pitchAdvice`
 */
export function doseFor(
  packet: PacketFacts & { unit: AmountUnit },
  alive: Alive,
  must: Must,
  remaining: number,
  when: { on: CalendarDay; timeZone: string },
): { dose: Dose; advice: PitchAdvice } {
  const facts = { form: packet.form, use: packet.use, viability: alive, ...must }
  const full = pitchAdvice(facts)
  const pitched = Math.min(remaining, full.grams)
  const advice = remaining > 0 ? pitchAdvice({ ...facts, availableGrams: pitched }) : full
  const noon = instantOn(when.on, USUAL_PITCH_HOUR, 0, when.timeZone)
  const waterMl = advice.rehydration?.waterMl ?? null
  const dose: Dose = {
    unit: packet.unit,
    grams: full.grams,
    low: full.low,
    high: full.high,
    enough: remaining >= full.low,
    rehydrationMl: waterMl,
    rehydrationTemperatureC: advice.rehydration?.temperatureC ?? null,
    steps: stepsFor(packet.form, waterMl),
    expectedHours: { ...advice.activityHours, likely: advice.expectedHoursToActivity },
    worryAfterHours: advice.worryAfterHours,
    ifNothingBy: addMinutes(noon, Math.round(advice.worryAfterHours * 60)),
    ifNothing: IF_NOTHING,
    cellsPerMl: advice.cellsPerMl,
  }
  return { dose, advice }
}

const IF_NOTHING = `Check that the must is under ${TOO_HOT_FOR_YEAST_C} °C, still sweet and not freshly sulphited. Then pitch again, from another packet.`

/** What to do, in order. Water, warmth and minutes are common practice; the pack's own words come first. */
function stepsFor(form: YeastForm, waterMl: number | null): Step[] {
  switch (form) {
    case 'dry':
      return [
        { title: `Warm ${amountText(waterMl ?? 0)} mL of water`, text: 'to 35–40 °C. Tap, not distilled.' },
        { title: 'Sprinkle, wait 20 minutes.', text: 'Then swirl.' },
        { title: 'Cool it to within 10 °C', text: 'of the must before you pitch.' },
      ]
    case 'liquid':
      return [
        { title: 'Take it out two hours ahead', text: 'so that it is within 10 °C of the must.' },
        { title: 'Shake it well.', text: 'Yeast settles at the bottom.' },
        { title: 'Open it slowly, then pour.', text: 'It may have built up gas: point it away from you.' },
      ]
    case 'slurry':
      return [
        { title: 'Pour off the liquid on top', text: 'and smell it. Sour or foul: throw it away.' },
        { title: 'Let it come to within 10 °C', text: 'of the must, with the lid loose.' },
        { title: 'Stir it and pour it in.', text: 'Measure the thick part.' },
      ]
  }
}
