/** What may have stopped a ferment, the likeliest to mend first. */
export const STUCK_CAUSES = [
  'cold',
  'nitrogen',
  'tolerance',
  'acid',
  'sulphite',
  'hot',
  'yeast',
  'not-fermentable',
] as const
export type StuckCause = (typeof STUCK_CAUSES)[number]

export interface StuckFacts {
  /** Latest temperature, °C. */
  temperatureC?: number | undefined
  abvPercent?: number | undefined
  tolerancePercent?: number | undefined
  ph?: number | undefined
  sulphiteMgPerLitre: number
  /** Nitrogen still missing by the recipe, mg/L, and whether feeds were ticked. */
  nitrogenShortMgPerLitre?: number | undefined
  feedsDone: number
  feedsPlanned: number
  /** Share of the expected drop done. */
  drop?: number | undefined
}

export interface StuckAdvice {
  cause: StuckCause
  /** What was found, or that it is not known. */
  fact: string
  /** What to do about it. */
  act: string
  /** `likely`: the figures point there; `look`: nothing is known yet; `unlikely`: they speak against it. */
  odds: 'likely' | 'look' | 'unlikely'
}

/** Cooler than this most wine and mead yeast dawdles; warmer than the other it is harmed (common practice). */
const COLD_C = 16
const HOT_C = 30
/** Acid below this stops most strains (common practice). */
const LOWEST_PH = 3
/** Free sulphite of this order holds yeast back (common practice). */
const SULPHITE_HOLDS_MG_PER_LITRE = 50
/** Nearer to its limit than this, a strain tires. */
const TOLERANCE_MARGIN_PERCENT = 1

/** What to look at when a ferment lies flat well above its expected end: likely causes first, then what is not known. */
export function stuckTriage(facts: StuckFacts): StuckAdvice[] {
  const advice = [
    cold(facts),
    nitrogen(facts),
    tolerance(facts),
    acid(facts),
    sulphite(facts),
    yeast(facts),
    notFermentable(facts),
  ]
  const rank = { likely: 0, look: 1, unlikely: 2 }
  return advice
    .map((entry, place) => ({ entry, place }))
    .sort((a, b) => rank[a.entry.odds] - rank[b.entry.odds] || a.place - b.place)
    .map(({ entry }) => entry)
}

function cold({ temperatureC }: StuckFacts): StuckAdvice {
  if (temperatureC === undefined)
    return {
      cause: 'cold',
      fact: 'No temperature was read.',
      act: 'Read it in the middle of the day, and bring it to 18 to 22 °C.',
      odds: 'look',
    }
  const degrees = `${temperatureC.toFixed(0)} °C at the last reading.`
  if (temperatureC > HOT_C)
    return {
      cause: 'hot',
      fact: degrees,
      act: 'That is hot enough to harm yeast. Cool it under 25 °C before you add fresh yeast.',
      odds: 'likely',
    }
  return {
    cause: 'cold',
    fact: degrees,
    act: 'Bring it to 18 to 22 °C, stir the yeast up gently, and read again in three days.',
    odds: temperatureC < COLD_C ? 'likely' : 'unlikely',
  }
}

function nitrogen(facts: StuckFacts): StuckAdvice {
  const { nitrogenShortMgPerLitre: short, feedsDone, feedsPlanned, drop = 0 } = facts
  const late = drop >= 0.5
  const act = late
    ? 'More than half the sugar is gone: yeast no longer takes up ammonium. Use a food made of yeast, as its label says.'
    : 'Give the next feed now, and stir it in.'
  if (feedsPlanned > feedsDone)
    return {
      cause: 'nitrogen',
      fact: `${feedsDone} of ${feedsPlanned} feeds are ticked.`,
      act,
      odds: 'likely',
    }
  if (short === undefined)
    return { cause: 'nitrogen', fact: 'The recipe does not say how much nitrogen it has.', act, odds: 'look' }
  if (short > 50 && feedsDone === 0)
    return {
      cause: 'nitrogen',
      fact: `By the recipe it lacks ${short.toFixed(0)} mg/L, and nothing was fed.`,
      act,
      odds: 'likely',
    }
  return { cause: 'nitrogen', fact: 'It was fed, or had enough.', act, odds: 'unlikely' }
}

function tolerance({ abvPercent, tolerancePercent }: StuckFacts): StuckAdvice {
  const act =
    'Yeast cannot be coaxed past its limit. Restart with a stronger strain built up in it, or keep it sweet and still.'
  if (abvPercent === undefined || tolerancePercent === undefined)
    return {
      cause: 'tolerance',
      fact: 'The limit of this strain is not written down.',
      act: 'Look at the packet: if it is near what you have, that is where it stops.',
      odds: 'look',
    }
  return {
    cause: 'tolerance',
    fact: `About ${abvPercent.toFixed(1)} % so far; the strain bears ${tolerancePercent.toFixed(0)} %.`,
    act,
    odds: abvPercent > tolerancePercent - TOLERANCE_MARGIN_PERCENT ? 'likely' : 'unlikely',
  }
}

function acid({ ph }: StuckFacts): StuckAdvice {
  const act = 'Raise it a little with potassium carbonate, as its label says, and read it again.'
  if (ph === undefined)
    return {
      cause: 'acid',
      fact: 'No pH was read.',
      act: 'Read it. Honey musts have little to hold their pH and can drop under 3.',
      odds: 'look',
    }
  return {
    cause: 'acid',
    fact: `pH ${ph.toFixed(1)} at the last reading.`,
    act,
    odds: ph < LOWEST_PH ? 'likely' : 'unlikely',
  }
}

function sulphite({ sulphiteMgPerLitre: mg }: StuckFacts): StuckAdvice {
  return {
    cause: 'sulphite',
    fact: mg > 0 ? `${mg.toFixed(0)} mg/L of sulphite were added.` : 'No sulphite is written down.',
    act: 'Stir it well to drive some off, wait a day, and pitch fresh yeast.',
    odds: mg >= SULPHITE_HOLDS_MG_PER_LITRE ? 'likely' : 'unlikely',
  }
}

function yeast({ drop }: StuckFacts): StuckAdvice {
  const act = 'Start fresh yeast in a cup of the must, let it work, and pour it in while it does.'
  return drop !== undefined && drop < 0.1
    ? { cause: 'yeast', fact: 'It hardly began.', act, odds: 'likely' }
    : { cause: 'yeast', fact: 'It worked for a while, so the yeast was alive.', act, odds: 'unlikely' }
}

function notFermentable({ drop }: StuckFacts): StuckAdvice {
  const near = drop !== undefined && drop > 0.9
  return {
    cause: 'not-fermentable',
    fact: near ? 'It is close to where it was expected to end.' : 'Much of the expected drop is missing.',
    act: 'What is left may not be sugar at all. If the recipe says so, correct what you expect.',
    odds: near ? 'look' : 'unlikely',
  }
}
