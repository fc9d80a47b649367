import type { KindRequest } from '#shared/kit/kind-contract'

export interface SeedKind {
  /** What other parts of the demo call it. */
  key: string
  facts: KindRequest
  /** Items as prefix, count and the shelves they stand on in turn. */
  tags: string
  count: number
  shelves: string[]
}

const GLASS = [
  'Keep must over 40 °C out of it. Glass heated on one side cracks; let a boiled must cool to hand-warm first.',
  'Never seal it while it ferments. The gas has to leave, or the glass gives way.',
  'Carry it in a crate or by the base, hands dry. The ring at the neck is not made for the weight.',
]

/** Fourteen kinds, sixty items: the shelves of the demo space. */
export const SHELVES: SeedKind[] = [
  {
    key: 'demijohn',
    tags: 'DJ',
    count: 10,
    shelves: ['A1', 'A2'],
    facts: {
      name: 'Demijohn 4.5 L, glass',
      category: 'vessel',
      description:
        'Clear glass with a narrow neck; takes a 30 mm bored bung. One imperial gallon to the shoulder.',
      capacityLitres: 4.5,
      turnaroundDays: 2,
      maxLoanDays: 42,
      maxAheadDays: 180,
      maxPerMember: 3,
      maxFillTemperatureC: 40,
      cautions: GLASS,
    },
  },
  {
    key: 'demijohn9',
    tags: 'DN',
    count: 3,
    shelves: ['A3'],
    facts: {
      name: 'Demijohn 9 L, glass',
      category: 'vessel',
      description:
        'Two gallons in a wicker sleeve. Full, it weighs as much as a small child: lift it with someone.',
      capacityLitres: 9,
      turnaroundDays: 2,
      maxLoanDays: 56,
      maxAheadDays: 180,
      maxPerMember: 1,
      maxFillTemperatureC: 40,
      cautions: GLASS,
    },
  },
  {
    key: 'pet5',
    tags: 'PF',
    count: 6,
    shelves: ['A4'],
    facts: {
      name: 'Fermenter 5 L, PET',
      category: 'vessel',
      description:
        'Light and unbreakable, with a wide neck for fruit. Good for primary, not for months of ageing.',
      capacityLitres: 5,
      turnaroundDays: 1,
      maxLoanDays: 28,
      maxPerMember: 3,
      maxFillTemperatureC: 50,
      cautions: [
        'Never scrub it. Scratches hold soil that no sanitiser reaches.',
        'Never seal it while it ferments. PET swells first, then the lid lets go.',
      ],
    },
  },
  {
    key: 'bucket',
    tags: 'BK',
    count: 5,
    shelves: ['B1'],
    facts: {
      name: 'Bucket 25 L, lidded',
      category: 'vessel',
      description:
        'Food-grade, marked in litres, lid with a grommet. For ale, for fruit on the pulp, for mixing a must.',
      capacityLitres: 25,
      turnaroundDays: 1,
      maxLoanDays: 28,
      maxPerMember: 2,
      maxFillTemperatureC: 80,
      cautions: ['Half fill it when you carry it hot. A full one of hot wort scalds whoever stumbles.'],
    },
  },
  {
    key: 'hydrometer',
    tags: 'HY',
    count: 6,
    shelves: ['Drawer 1'],
    facts: {
      name: 'Hydrometer, marked for 20 °C',
      category: 'instrument',
      description: '0.990 to 1.160 with its trial jar. Each has its own correction, found in plain water.',
      turnaroundDays: 0,
      maxLoanDays: 3,
      maxAheadDays: 90,
      maxPerMember: 1,
      selfApproving: true,
      markedForTemperatureC: 20,
      calibrationMonths: 6,
      cautions: ['Lower it in, do not drop it. A chipped bulb reads wrong and sheds glass.'],
    },
  },
  {
    key: 'hydrometer60',
    tags: 'HF',
    count: 2,
    shelves: ['Drawer 1'],
    facts: {
      name: 'Hydrometer, marked for 15.6 °C',
      category: 'instrument',
      description:
        'The older pattern, marked for 60 °F. Put it down as what it is, and the app corrects for it.',
      turnaroundDays: 0,
      maxLoanDays: 3,
      maxAheadDays: 90,
      maxPerMember: 1,
      selfApproving: true,
      markedForTemperatureC: 15.56,
      calibrationMonths: 6,
      cautions: ['Lower it in, do not drop it. A chipped bulb reads wrong and sheds glass.'],
    },
  },
  {
    key: 'siphon',
    tags: 'SI',
    count: 6,
    shelves: ['C1'],
    facts: {
      name: 'Siphon with tap, 8 mm',
      category: 'transfer',
      description: 'Hose, rigid stem and a lees cap. Starts with a squeeze, never with your mouth.',
      turnaroundDays: 1,
      maxLoanDays: 3,
      maxAheadDays: 90,
      maxPerMember: 1,
      selfApproving: true,
      needsSanitised: true,
      sanitisedHours: 72,
      maxFillTemperatureC: 60,
      cautions: ['Run sanitiser right through the hose. What sits inside it goes into the next batch.'],
    },
  },
  {
    key: 'siphonWild',
    tags: 'SW',
    count: 2,
    shelves: ['W1'],
    facts: {
      name: 'Siphon, wild cultures only',
      category: 'transfer',
      description: 'For mixed and wild ferments. It lives on its own shelf and never meets a clean batch.',
      turnaroundDays: 1,
      maxLoanDays: 3,
      maxAheadDays: 90,
      maxPerMember: 1,
      selfApproving: true,
      wildOnly: true,
      cautions: ['Bring it back to shelf W1. Wild yeast hides in soft hose whatever it was rinsed with.'],
    },
  },
  {
    key: 'capper',
    tags: 'CA',
    count: 2,
    shelves: ['C3'],
    facts: {
      name: 'Bench capper',
      category: 'closure',
      description: 'For 26 mm crown caps, bottles up to 32 cm tall.',
      turnaroundDays: 0,
      maxLoanDays: 2,
      maxAheadDays: 90,
      maxPerMember: 1,
      needsInduction: true,
      inductionNote: 'A steward shows it on Tuesday evenings; it takes ten minutes.',
      cautions: ['Wear goggles while you cap. A bottle with a flaw bursts under the lever.'],
    },
  },
  {
    key: 'corker',
    tags: 'CO',
    count: 3,
    shelves: ['C3'],
    facts: {
      name: 'Hand corker',
      category: 'closure',
      description: 'Two levers, for straight corks. Set the depth on an empty bottle first.',
      turnaroundDays: 0,
      maxLoanDays: 2,
      maxAheadDays: 90,
      maxPerMember: 1,
      selfApproving: true,
      cautions: ['Cork only what has finished. A cork under pressure leaves on its own.'],
    },
  },
  {
    key: 'boiler',
    tags: 'BO',
    count: 2,
    shelves: ['Floor'],
    facts: {
      name: 'Boiler 27 L, electric',
      category: 'heating',
      description: '2.4 kW with a tap and a sight glass. Needs a socket of its own.',
      capacityLitres: 27,
      turnaroundDays: 1,
      maxLoanDays: 2,
      maxAheadDays: 90,
      maxPerMember: 1,
      needsInduction: true,
      inductionMonths: 24,
      inductionNote: 'Book a brew day with a steward; you boil one together.',
      maxFillTemperatureC: 100,
      cautions: [
        'Never leave it while it comes to the boil. Wort foams over in seconds, and it scalds.',
        'Fill it before you switch it on. A dry element burns out and can start a fire.',
      ],
    },
  },
  {
    key: 'thermometer',
    tags: 'TH',
    count: 6,
    shelves: ['Drawer 2'],
    facts: {
      name: 'Probe thermometer',
      category: 'instrument',
      description: '-10 to 110 °C, steel probe on a cable.',
      turnaroundDays: 0,
      maxLoanDays: 7,
      maxAheadDays: 90,
      maxPerMember: 1,
      selfApproving: true,
    },
  },
  {
    key: 'refractometer',
    tags: 'RE',
    count: 4,
    shelves: ['Drawer 2'],
    facts: {
      name: 'Refractometer, 0 to 32 °Bx',
      category: 'instrument',
      description:
        'Two drops are enough. Once it ferments, the reading needs the original gravity beside it.',
      turnaroundDays: 0,
      maxLoanDays: 3,
      maxAheadDays: 90,
      maxPerMember: 1,
      selfApproving: true,
      cautions: [
        'Read fermenting must with the app open. Alcohol bends light too, so the bare figure is wrong.',
      ],
    },
  },
  {
    key: 'phMeter',
    tags: 'PH',
    count: 3,
    shelves: ['Drawer 3'],
    facts: {
      name: 'pH meter',
      category: 'instrument',
      description: 'With buffers for 4.00 and 7.00. Set it with both before you measure.',
      turnaroundDays: 0,
      maxLoanDays: 2,
      maxAheadDays: 90,
      maxPerMember: 1,
      cautions: ['Put it back wet, in its storage solution. A dry electrode never reads true again.'],
    },
  },
]

/** Offsets of the hydrometers: what each showed in tap water, at which temperature, how many days ago. */
export const WATER_CHECKS: [
  tag: string,
  waterReadingSg: number,
  waterTemperatureC: number,
  daysAgo: number,
][] = [
  ['HY-01', 1.0, 20, 40],
  ['HY-02', 1.002, 20, 40],
  ['HY-03', 0.999, 19, 41],
  ['HY-04', 0.998, 21, 41],
  ['HY-05', 1.001, 20, 230],
  ['HF-01', 0.999, 20, 40],
]

export const FAULTS: {
  tag: string
  by: string
  daysAgo: number
  summary: string
  blocking: boolean
  severity?: 'danger'
  settled?: { daysAgo: number; note: string }
}[] = [
  {
    tag: 'DJ-09',
    by: 'member2',
    daysAgo: 9,
    summary: 'Hairline crack from the shoulder down',
    blocking: true,
    severity: 'danger',
  },
  { tag: 'BK-04', by: 'member', daysAgo: 6, summary: 'Lid does not close on one side', blocking: false },
  {
    tag: 'PH-02',
    by: 'member5',
    daysAgo: 15,
    summary: 'Drifts: will not hold the 7.00 buffer',
    blocking: true,
  },
  { tag: 'SI-05', by: 'member3', daysAgo: 3, summary: 'Tap drips when shut', blocking: false },
  {
    tag: 'BO-01',
    by: 'steward2',
    daysAgo: 60,
    summary: 'Tap seal weeps when hot',
    blocking: true,
    settled: { daysAgo: 52, note: 'New silicone seal, boiled water through it twice' },
  },
  {
    tag: 'TH-03',
    by: 'member8',
    daysAgo: 30,
    summary: 'Display fades',
    blocking: false,
    settled: { daysAgo: 29, note: 'New cell' },
  },
]

/** What was sanitised lately: how, for how long, how many hours ago. */
export const SANITISED: [
  tag: string,
  agent: string,
  concentration: string,
  minutes: number,
  hoursAgo: number,
][] = [
  ['SI-01', 'iodophor', '25 mg/L', 2, 5],
  ['SI-02', 'iodophor', '25 mg/L', 2, 5],
  ['SI-03', 'acid-anionic', '1.5 mL/L', 2, 30],
  ['SI-04', 'iodophor', '25 mg/L', 1, 96],
  ['SI-06', 'peracetic-acid', '150 mg/L', 5, 28],
  ['DJ-01', 'iodophor', '12.5 mg/L', 3, 6],
]

/** Came back unwashed and stand by the sink. */
export const DIRTY = ['DJ-06', 'BK-03', 'SI-05', 'PF-05', 'RE-03']

/** Gone from the shelf, kept in the history. */
export const GONE: [tag: string, status: 'retired' | 'lost' | 'repair', daysAgo: number, reason: string][] = [
  ['DN-03', 'repair', 12, 'Wicker sleeve being rewoven'],
  ['TH-06', 'lost', 33, 'Not among the things after the open day'],
  ['PF-06', 'retired', 48, 'Scratched inside beyond cleaning'],
]

/** Met wild cultures in a batch, and leaves the clean pool. */
export const TURNED_WILD: [tag: string, daysAgo: number, reason: string][] = [
  ['BK-05', 20, 'A spontaneous cider fermented in it'],
]

/** Who was shown what, and when. */
export const INDUCTIONS: [login: string, kind: string, daysAgo: number][] = [
  ['member', 'capper', 120],
  ['member', 'boiler', 200],
  ['member2', 'capper', 90],
  ['member3', 'boiler', 760],
  ['member5', 'boiler', 300],
  ['member8', 'capper', 33],
  ['steward', 'boiler', 400],
  ['steward', 'capper', 400],
  ['steward2', 'boiler', 210],
]
