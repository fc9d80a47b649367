import type { BatchRequest } from '#shared/batches/contract'
import type { BottlingRequest, TastingRequest } from '#shared/batches/bottling-contract'
import type { BatchStatus, StepKind } from '#shared/batches/vocabulary'

/** A line of the recipe by the larder's name for it, or one's own; the quantity in the ingredient's unit. */
type SeedLine = [
  name: string,
  quantity: number,
  more?: { own?: true; stage?: 'feed' | 'fining' | 'bottling'; perBottle?: true },
]

export interface SeedBatch {
  by: string
  request: Omit<BatchRequest, 'recipe'>
  recipe: SeedLine[]
  /** When it was written into the book, and the first day of its plan; days from today, negative ones past. */
  writtenDay: number
  startDay?: number
  /** Days by which what is not ticked came later than its template. */
  moved?: number
  /** Kinds of steps ticked, each as often as it stands here, in order. */
  done: StepKind[]
  note?: string
  /** Day from today, gravity as read, °C; the item's tag where it was the space's. */
  readings: [day: number, gravity: number, temperatureC: number, tag?: string, ph?: number][]
  bottled?: Omit<Partial<BottlingRequest>, 'bottledOn'> & { day: number; bottles: number }
  tasted?: Omit<TastingRequest, 'tastedOn' | 'look' | 'nose' | 'taste' | 'changes'> &
    Partial<TastingRequest> & { day: number }
  ends?: BatchStatus
  /** Loans of its maker that are for it: kind and collection day. */
  loans?: [kind: string, fromDay: number][]
}

const still = { bottleKind: 'still-wine', bottleMl: 750, primer: 'none' } as const
const fizzy = { bottleKind: 'beer', bottleMl: 500, primer: 'sucrose', targetVolumesCo2: 2.4 } as const
const closures: SeedLine = ['Crown caps, 26 mm', 1, { stage: 'bottling', perBottle: true }]

/** A batch in every state: one that outlasts its loan, one that is stuck, one that was bottled against advice. */
export const BOOK: SeedBatch[] = [
  {
    by: 'member',
    request: {
      name: 'Hedge plum melomel',
      style: 'melomel',
      volumeLitres: 4.5,
      og: 1.088,
      expectedFg: 0.998,
      yeast: 'Fallow 71',
      tolerancePercent: 14,
      notes: 'Plums from the lane behind the allotments, stoned and frozen in August.',
      waterTreatment: 'sulphite',
      ...still,
    },
    recipe: [
      ['Heather honey', 1050],
      ['Damsons, frozen', 900],
      ['Yeast food, mixed', 4, { stage: 'feed' }],
    ],
    writtenDay: -29,
    startDay: -25,
    moved: 12,
    done: ['prepare', 'prepare', 'prepare', 'pitch', 'feed', 'feed', 'feed'],
    readings: [
      [-25, 1.088, 20],
      [-22, 1.08, 20.5],
      [-18, 1.063, 21],
      [-13, 1.044, 20],
      [-8, 1.026, 21, 'HY-01', 3.4],
      [-3, 1.013, 19.5, 'HY-01'],
      [-1, 1.012, 19, 'HY-03'],
    ],
    loans: [
      ['demijohn', -25],
      ['siphon', 0],
    ],
  },
  {
    by: 'member',
    request: {
      name: 'Cold-snap cider',
      style: 'cider',
      volumeLitres: 4.5,
      og: 1.052,
      yeast: 'Pressed juice, own yeast',
      waterTreatment: 'none',
      ...fizzy,
    },
    recipe: [['Apple juice, pressed', 4600], closures],
    writtenDay: -13,
    startDay: -12,
    done: ['prepare', 'prepare', 'pitch', 'feed'],
    readings: [
      [-11, 1.052, 14],
      [-8, 1.046, 13],
      [-5, 1.033, 13.5],
    ],
  },
  {
    by: 'member',
    request: {
      name: 'A cyser for the spring',
      style: 'cyser',
      volumeLitres: 4.5,
      yeast: 'Fallow 71',
      tolerancePercent: 14,
      waterTreatment: 'sulphite',
      ...still,
    },
    recipe: [
      ['Apple juice, pressed', 3600],
      ['Blossom honey', 650],
      ['DAP', 3, { stage: 'feed' }],
    ],
    writtenDay: -1,
    startDay: 3,
    done: [],
    readings: [],
    loans: [['demijohn', 3]],
  },
  {
    by: 'member',
    request: {
      name: 'Winter mead',
      style: 'mead',
      volumeLitres: 4.5,
      nitrogenDemand: 'high',
      waterTreatment: 'stand',
      ...still,
    },
    recipe: [
      ['Heather honey', 1450],
      ['DAP', 4, { stage: 'feed' }],
      ['Two-part finings, part one', 2, { stage: 'fining' }],
      ['Two-part finings, part two', 10, { stage: 'fining' }],
    ],
    writtenDay: -2,
    done: [],
    readings: [],
  },
  {
    by: 'member',
    request: {
      name: 'Elderflower cyser',
      style: 'cyser',
      volumeLitres: 4.5,
      og: 1.076,
      expectedFg: 0.998,
      yeast: 'Fallow 71',
      sulphiteMgPerLitre: 40,
      visibility: 'space',
      notes: 'Twenty heads of elderflower, no stalks, in for three days.',
      ...still,
    },
    recipe: [
      ['Apple juice, pressed', 3800],
      ['Heather honey', 420],
      ['Elderflower', 40, { own: true }],
    ],
    writtenDay: -150,
    startDay: -147,
    done: ['prepare', 'prepare', 'prepare', 'pitch', 'feed', 'feed', 'rack', 'fine', 'bottle', 'taste'],
    readings: [
      [-147, 1.076, 21],
      [-142, 1.05, 20],
      [-136, 1.021, 20],
      [-126, 1.002, 19],
      [-118, 0.998, 19, 'HY-02'],
      [-110, 0.998, 18, 'HY-02'],
    ],
    bottled: { day: -109, bottles: 5, ...still },
    tasted: {
      day: -20,
      look: 'Pale straw, clear.',
      nose: 'Elderflower first, apple skin after.',
      taste: 'Dry, light, a little short. Better cold.',
      again: 'with-changes',
      changes: 'Half the flowers, and a spoon of tannin.',
    },
  },
  {
    by: 'member2',
    request: {
      name: 'Blackcurrant melomel',
      style: 'melomel',
      volumeLitres: 5,
      og: 1.094,
      expectedFg: 1.0,
      yeast: 'Hobthrush',
      tolerancePercent: 13,
      visibility: 'space',
      notes: 'Standing in the back room. Is it the cold? Advice welcome.',
      ...still,
    },
    recipe: [
      ['Blossom honey', 1150],
      ['Blackcurrants', 800, { own: true }],
      ['DAP', 4, { stage: 'feed' }],
    ],
    writtenDay: -24,
    startDay: -22,
    done: ['prepare', 'prepare', 'prepare', 'pitch', 'feed'],
    readings: [
      [-22, 1.094, 20],
      [-20, 1.083, 20],
      [-18, 1.066, 19],
      [-16, 1.05, 18],
      [-14, 1.04, 16],
      [-11, 1.038, 14],
      [-7, 1.038, 13],
      [-4, 1.037, 13],
      [-1, 1.038, 12.5],
    ],
    loans: [['pet5', -14]],
  },
  {
    by: 'member3',
    request: {
      name: 'Orchard-end cider',
      style: 'cider',
      volumeLitres: 9,
      og: 1.054,
      expectedFg: 1.0,
      yeast: 'Garth',
      ...fizzy,
    },
    recipe: [['Apple juice, pressed', 9200], closures],
    writtenDay: -48,
    startDay: -42,
    done: ['prepare', 'prepare', 'pitch', 'feed', 'rack'],
    readings: [
      [-41, 1.054, 18],
      [-36, 1.034, 18],
      [-30, 1.013, 17],
      [-22, 1.003, 17],
      [-9, 1.0, 16.5, 'HY-02'],
      [-1, 1.0, 17, 'HY-02'],
    ],
    ends: 'conditioning',
    loans: [['demijohn9', -41]],
  },
  {
    by: 'member4',
    request: {
      name: 'Table mild',
      style: 'beer',
      volumeLitres: 20,
      og: 1.038,
      expectedFg: 1.011,
      yeast: 'Sallow',
      visibility: 'space',
      ...fizzy,
      primer: 'tablets',
      targetVolumesCo2: 2,
    },
    recipe: [['Barley malt', 3200, { own: true }], ['Hop cones, Marrowby', 25], closures],
    writtenDay: -60,
    startDay: -55,
    done: ['prepare', 'prepare', 'prepare', 'pitch', 'chill', 'bottle', 'condition', 'taste'],
    readings: [
      [-55, 1.038, 20],
      [-53, 1.022, 20],
      [-50, 1.013, 19],
      [-47, 1.011, 19, 'HY-01'],
      [-39, 1.011, 18, 'HY-01'],
    ],
    bottled: { day: -38, bottles: 38, ...fizzy, primer: 'tablets', targetVolumesCo2: 2 },
    tasted: { day: -12, taste: 'Soft, brown, gone in an evening.', again: 'yes' },
    ends: 'finished',
  },
  {
    by: 'member5',
    request: { name: 'First mead', style: 'mead', volumeLitres: 4.5, og: 1.08, yeast: 'Fallow 71', ...still },
    recipe: [
      ['Blossom honey', 1250],
      ['DAP', 3, { stage: 'feed' }],
    ],
    writtenDay: -5,
    startDay: -4,
    done: ['prepare', 'prepare', 'prepare', 'pitch', 'feed'],
    readings: [
      [-4, 1.08, 21],
      [-2, 1.074, 21],
      [-1, 1.069, 21.5],
    ],
    loans: [['pet5', -4]],
  },
  {
    by: 'member7',
    request: {
      name: 'Kitchen-window wine',
      style: 'wine',
      volumeLitres: 4.5,
      og: 1.082,
      expectedFg: 0.996,
      yeast: 'Whatever was in the drawer',
      ...still,
      bottleKind: 'swing-top',
    },
    recipe: [
      ['White sugar', 900],
      ['Elderberries, frozen', 700],
    ],
    writtenDay: -40,
    startDay: -38,
    done: ['prepare', 'prepare', 'prepare', 'pitch', 'feed', 'rack'],
    readings: [
      [-38, 1.082, 22],
      [-31, 1.04, 21],
      [-24, 1.015, 20],
      [-18, 1.008, 19],
    ],
    bottled: {
      day: -17,
      bottles: 6,
      bottleKind: 'swing-top',
      bottleMl: 700,
      primer: 'none',
      anyway: true,
      note: 'Vessel was due back. In a crate with a lid, let off every evening.',
    },
  },
  {
    by: 'steward',
    request: {
      name: 'Sour cherry, wild',
      style: 'other',
      volumeLitres: 5,
      wild: true,
      og: 1.05,
      expectedFg: 1.002,
      yeast: 'From the fruit',
      visibility: 'space',
      ...still,
    },
    recipe: [
      ['White sugar', 380],
      ['Sour cherries', 1600, { own: true }],
    ],
    writtenDay: -18,
    startDay: -16,
    done: ['prepare', 'prepare', 'prepare', 'pitch'],
    readings: [
      [-16, 1.05, 20],
      [-10, 1.041, 20],
      [-4, 1.026, 20.5],
    ],
  },
  {
    by: 'member9',
    request: { name: 'Nettle beer', style: 'beer', volumeLitres: 5, og: 1.034, ...fizzy },
    recipe: [
      ['White sugar', 400],
      ['Nettle tops', 600, { own: true }],
    ],
    writtenDay: -80,
    startDay: -78,
    done: ['prepare', 'prepare', 'prepare', 'pitch'],
    note: 'Smelled of drains on the fourth day.',
    readings: [
      [-78, 1.034, 22],
      [-74, 1.02, 22],
    ],
    ends: 'abandoned',
  },
]
