import type { BatchStyle, StepKind } from './vocabulary.ts'

/** A thing a step needs, by what it does; `kit-choice` finds a kind of the shelf for it. */
export const KIT_ROLES = ['fermenter', 'second-vessel', 'hydrometer', 'siphon', 'closer', 'heater'] as const
export type KitRole = (typeof KIT_ROLES)[number]

export interface TemplateNeed {
  role: KitRole
  fromDays: number
  toDays: number
  /** Kept until the day of the first step of this kind. */
  until?: StepKind
}

export interface TemplateStep {
  kind: StepKind
  title: string
  /** How the step is done, in a sentence or two. */
  guidance: string
  dayOffset: number
  needs: TemplateNeed[]
}

const onTheDay = (role: KitRole): TemplateNeed => ({ role, fromDays: 0, toDays: 0 })
/** One vessel from the day the must is made to the day it is bottled. */
const wholeFerment: TemplateNeed = { role: 'fermenter', fromDays: 0, toDays: 0, until: 'bottle' }
/** Two readings a week apart: what the bottling gate asks for. */
const gravityBeforeBottling: TemplateNeed[] = [
  { role: 'hydrometer', fromDays: -7, toDays: -7 },
  onTheDay('hydrometer'),
]

const treatWater = (dayOffset: number): TemplateStep => ({
  kind: 'prepare',
  title: 'Treat the water',
  guidance:
    'A measured pinch of sulphite works at once on chlorine and chloramine. Standing overnight in an open pan drives off free chlorine only.',
  dayOffset,
  needs: [],
})

const cool = (dayOffset: number): TemplateStep => ({
  kind: 'prepare',
  title: 'Cool it, then read the gravity',
  guidance:
    'Bring it under 25 °C first: a hydrometer reads low in warm must, and yeast is hurt by hot. Fill the vessel, read, and write it down.',
  dayOffset,
  needs: [wholeFerment, onTheDay('hydrometer')],
})

const pitch = (dayOffset: number): TemplateStep => ({
  kind: 'pitch',
  title: 'Pitch the yeast',
  guidance: 'Bring the yeast within 10 °C of the must before the two meet. Fit the airlock.',
  dayOffset,
  needs: [],
})

const feed = (dayOffset: number, title: string, guidance: string): TemplateStep => ({
  kind: 'feed',
  title,
  guidance,
  dayOffset,
  needs: [],
})
const firstFeed = (dayOffset: number) =>
  feed(
    dayOffset,
    'First feed',
    'Once it shows activity. Stir the gas out gently first, or it will foam over.',
  )
const secondFeed = (dayOffset: number) =>
  feed(dayOffset, 'Second feed', 'When about a sixth of the sugar is gone.')
const lastFeed = (dayOffset: number) =>
  feed(
    dayOffset,
    'Last feed',
    'By the time a third of the sugar is gone. Later, yeast leaves it in the drink.',
  )

const rack = (dayOffset: number, title = 'Rack off the lees'): TemplateStep => ({
  kind: 'rack',
  title,
  guidance:
    'Siphon into the second vessel with the outlet under the surface. Wash and sanitise the first, and siphon it back. Top up close to the neck.',
  dayOffset,
  needs: [onTheDay('siphon'), onTheDay('second-vessel'), onTheDay('hydrometer')],
})

const fine = (dayOffset: number): TemplateStep => ({
  kind: 'fine',
  title: 'Fine in two parts',
  guidance:
    'Stir in the first part gently, wait an hour, then the second: they carry opposite charges and meet in the drink.',
  dayOffset,
  needs: [],
})

const chill = (dayOffset: number): TemplateStep => ({
  kind: 'chill',
  title: 'Chill to clear',
  guidance:
    'Two or three cold days drop what floats. Cold also stops yeast without finishing the sugar, so read the gravity before.',
  dayOffset,
  needs: [],
})

const bottle = (dayOffset: number): TemplateStep => ({
  kind: 'bottle',
  title: 'Bottle',
  guidance:
    'Only once two readings a week apart agree. Sanitise bottles and closures; leave out chipped glass.',
  dayOffset,
  needs: [...gravityBeforeBottling, onTheDay('siphon'), onTheDay('closer')],
})

const condition = (dayOffset: number): TemplateStep => ({
  kind: 'condition',
  title: 'Condition warm',
  guidance: 'About two weeks at 18 to 22 °C in a box with a lid, then chill one and open it over a sink.',
  dayOffset,
  needs: [],
})

const taste = (dayOffset: number, title = 'Taste it'): TemplateStep => ({
  kind: 'taste',
  title,
  guidance: 'Write down how it looks, smells and tastes, and whether you would make it again.',
  dayOffset,
  needs: [],
})

const dissolve = (what: string, guidance: string): TemplateStep => ({
  kind: 'prepare',
  title: what,
  guidance,
  dayOffset: 0,
  needs: [],
})

/**
 * Steps each style usually takes, with the day each falls on counted from the first. Order and distances are common
 * practice for 4 to 25 L at 18 to 22 °C; members change them, and yeast decides.
 */
const TEMPLATES: Record<BatchStyle, readonly TemplateStep[]> = {
  mead: [
    treatWater(0),
    dissolve('Dissolve the honey', 'Warm water, under 50 °C, is enough: boiling drives off the scent.'),
    cool(0),
    pitch(0),
    firstFeed(1),
    secondFeed(3),
    lastFeed(6),
    rack(28),
    fine(42),
    bottle(49),
    taste(84),
  ],
  cyser: [
    treatWater(0),
    dissolve(
      'Dissolve the honey in the juice',
      'Warm a part of the juice, stir the honey in, add the rest cold.',
    ),
    cool(0),
    pitch(0),
    firstFeed(1),
    lastFeed(4),
    rack(21),
    fine(30),
    bottle(35),
    taste(63),
  ],
  melomel: [
    treatWater(0),
    dissolve(
      'Dissolve the honey and add the fruit',
      'Freeze and thaw the fruit first, so that it gives its juice. Leave a fifth of the vessel empty for foam.',
    ),
    cool(0),
    pitch(0),
    firstFeed(1),
    secondFeed(3),
    lastFeed(6),
    rack(14, 'Rack off the fruit'),
    rack(35),
    fine(42),
    bottle(49),
    taste(84),
  ],
  cider: [
    dissolve(
      'Prepare the juice',
      'Taste it, and sulphite it now if you mean to; then wait a day for the yeast.',
    ),
    cool(1),
    pitch(1),
    feed(3, 'Feed', 'Once it shows activity. Juice from the press often needs none.'),
    rack(15),
    bottle(29),
    condition(29),
    taste(43),
  ],
  wine: [
    treatWater(0),
    dissolve(
      'Prepare the fruit and dissolve the sugar',
      'Dissolve all the sugar before you read the gravity.',
    ),
    cool(0),
    pitch(0),
    firstFeed(1),
    lastFeed(4),
    rack(7, 'Strain off the pulp'),
    rack(28),
    fine(37),
    bottle(44),
    taste(104),
  ],
  beer: [
    treatWater(0),
    {
      kind: 'prepare',
      title: 'Make the wort and boil it',
      guidance: 'Watch it as it comes to the boil. Cover it once the heat is off.',
      dayOffset: 0,
      needs: [onTheDay('heater')],
    },
    cool(0),
    pitch(0),
    chill(12),
    bottle(15),
    condition(15),
    taste(29),
  ],
  other: [
    treatWater(0),
    dissolve('Dissolve the sugar', 'Stir until nothing is left at the bottom, or the gravity will read low.'),
    cool(0),
    pitch(0),
    firstFeed(1),
    rack(14),
    bottle(28),
    taste(56),
  ],
}

/** The usual plan of a style; a drink bottled still is not conditioned, one to be carbonated is. */
export function templateFor(style: BatchStyle, carbonated: boolean): TemplateStep[] {
  const steps = TEMPLATES[style]
  if (!carbonated) return steps.filter((step) => step.kind !== 'condition')
  if (steps.some((step) => step.kind === 'condition')) return [...steps]
  const bottled = steps.findIndex((step) => step.kind === 'bottle')
  return steps.flatMap((step, place) => (place === bottled ? [step, condition(step.dayOffset)] : [step]))
}
