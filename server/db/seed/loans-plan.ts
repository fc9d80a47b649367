/** A loan as the demo tells it; days count from today, negative ones are past. */
export interface PlannedLoan {
  /** Login of the borrower. */
  who: string
  /** Key of the kind. */
  kind: string
  /** When it was asked for; the day it starts unless said. */
  asked?: number
  from: number
  to: number
  /** How far it has come. */
  reach: 'requested' | 'approved' | 'out' | 'returned' | 'declined' | 'cancelled' | 'lapsed'
  /** Days past the return-by day at which it came back. */
  late?: number
  /** Asks to keep it until this day. */
  extendTo?: number
  note?: string
}

/** How the shelf stands today: something in every state, and one shelf in trouble. */
export const PRESENT: PlannedLoan[] = [
  // The member one signs in as first: out, due tomorrow, to collect, asked for.
  {
    who: 'member',
    kind: 'demijohn',
    asked: -28,
    from: -25,
    to: 10,
    reach: 'out',
    note: 'Hedge plum melomel',
  },
  { who: 'member', kind: 'hydrometer', from: -1, to: 1, reach: 'out' },
  { who: 'member', kind: 'siphon', asked: -3, from: 0, to: 2, reach: 'approved' },
  {
    who: 'member',
    kind: 'demijohn',
    asked: -1,
    from: 3,
    to: 31,
    reach: 'requested',
    note: 'A cyser for the spring',
  },
  // Three large demijohns, one of them late: whoever comes next has nothing to collect.
  { who: 'member3', kind: 'demijohn9', asked: -45, from: -41, to: -3, reach: 'out' },
  { who: 'member6', kind: 'demijohn9', asked: -22, from: -20, to: 16, reach: 'out' },
  { who: 'member8', kind: 'demijohn9', asked: -12, from: 0, to: 21, reach: 'approved' },
  { who: 'member5', kind: 'pet5', asked: -10, from: -4, to: 14, reach: 'out' },
  // Today at the desk.
  { who: 'member2', kind: 'demijohn', asked: -40, from: -35, to: 0, reach: 'out' },
  { who: 'member4', kind: 'demijohn', asked: -30, from: -28, to: -1, reach: 'out' },
  { who: 'member7', kind: 'demijohn', asked: -9, from: -7, to: 28, reach: 'out' },
  { who: 'member9', kind: 'bucket', asked: -20, from: -18, to: 2, reach: 'out', extendTo: 6 },
  { who: 'member10', kind: 'bucket', asked: -6, from: 1, to: 15, reach: 'approved' },
  {
    who: 'member5',
    kind: 'bucket',
    asked: -1,
    from: 2,
    to: 22,
    reach: 'requested',
    note: 'Ten litres of mild',
  },
  { who: 'member2', kind: 'pet5', asked: -15, from: -14, to: 8, reach: 'out' },
  { who: 'member8', kind: 'pet5', asked: -2, from: 0, to: 20, reach: 'approved' },
  { who: 'member11', kind: 'corker', asked: -4, from: -1, to: 0, reach: 'out' },
  { who: 'member6', kind: 'hydrometer', from: -2, to: 0, reach: 'out' },
  // What became of others lately.
  { who: 'member10', kind: 'demijohn', asked: -14, from: -9, to: 12, reach: 'lapsed' },
  { who: 'member7', kind: 'bucket', asked: -16, from: -12, to: 6, reach: 'declined' },
  { who: 'member11', kind: 'pet5', asked: -13, from: -8, to: 6, reach: 'cancelled' },
]

/** Kinds the past is made of, how long each goes out, and how often it is asked for. */
const HABITS: [kind: string, days: number, weight: number][] = [
  ['demijohn', 21, 5],
  ['pet5', 14, 3],
  ['bucket', 14, 3],
  ['hydrometer', 2, 6],
  ['siphon', 2, 4],
  ['hydrometer60', 2, 1],
  ['corker', 1, 2],
]
const BORROWERS = Array.from({ length: 11 }, (_, index) => (index === 0 ? 'member' : `member${index + 1}`))

/** Three months of ordinary loans, the same at every seeding: a small generator with a fixed start, no chance in it. */
export function pastLoans(): PlannedLoan[] {
  let state = 20_261
  const next = (below: number) => {
    state = (state * 1_103_515_245 + 12_345) % 2_147_483_648
    return Math.floor((state / 2_147_483_648) * below)
  }
  const weighted = HABITS.flatMap((habit) => Array.from({ length: habit[2] }, () => habit))
  const loans: PlannedLoan[] = []
  for (let day = -90; day <= -6; day += 1) {
    for (let count = next(3); count > 0; count -= 1) {
      const [kind, days] = weighted[next(weighted.length)] ?? ['hydrometer', 2]
      const length = Math.max(1, days - next(Math.ceil(days / 2)))
      const from = day + 1 + next(4)
      const late = next(9) === 0 ? 1 + next(4) : 0
      // Over by yesterday, so that the present is what is told above.
      if (from + length + late > -2) continue
      const who = BORROWERS[next(BORROWERS.length)] ?? 'member'
      loans.push({ who, kind, asked: day, from, to: from + length, reach: 'returned', late })
    }
  }
  return loans
}
