/** Days a plan takes from one shelf, counted from its first day: 0 to 0 is that day alone. */
export interface Span {
  from: number
  to: number
}

/** A shelf, and what a plan asks of it. Two spans that share a day take two things from it that day. */
export interface ShelfDemand {
  /** Things to spare on each day, from day 0 of the search; may be negative. */
  spare: readonly number[]
  spans: readonly Span[]
}

export interface StartSearch {
  shelves: readonly ShelfDemand[]
  /** First and last day the plan may start on, both included. */
  first: number
  last: number
}

/** A stretch of days, from the first day of the plan, on which a shelf must have `level` things to spare. */
interface Stretch extends Span {
  level: number
}

/**
 * The first day from which every shelf has enough to spare on every day the plan needs it, or undefined when there is
 * none. Exact: a day that cannot serve a stretch rules out every start up to it, and the search goes on after that.
 *
 * @throws RangeError when a shelf does not tell of every day the search may reach
 *
 * One vessel, spare `[1, 0, 1, 1, 1]`, for three days: the plan can start on day 2.
 */
export function earliestStart({ shelves, first, last }: StartSearch): number | undefined {
  const wanted = shelves.map((shelf) => ({ shelf, stretches: stretchesOf(shelf.spans) }))
  for (const { shelf, stretches } of wanted) {
    const reach = last + Math.max(0, ...stretches.map((stretch) => stretch.to))
    if (first <= last && stretches.length > 0 && reach >= shelf.spare.length)
      throw new RangeError(`spare tells of ${shelf.spare.length} days, the search reaches day ${reach}`)
  }
  let start = first
  while (start <= last) {
    let next = start
    for (const { shelf, stretches } of wanted)
      for (const stretch of stretches) {
        const short = lastShort(shelf.spare, stretch, start)
        if (short !== undefined) next = Math.max(next, short - stretch.from + 1)
      }
    if (next === start) return start
    start = next
  }
  return undefined
}

/** Whether a plan can start on one day: what the search asks of each. */
export function canStart(shelves: readonly ShelfDemand[], start: number): boolean {
  return shelves.every((shelf) =>
    stretchesOf(shelf.spans).every((stretch) => lastShort(shelf.spare, stretch, start) === undefined),
  )
}

/** The last day of a stretch on which too little is spare: looked for from the end, since that one rules out most. */
function lastShort(spare: readonly number[], stretch: Stretch, start: number): number | undefined {
  for (let at = start + stretch.to; at >= start + stretch.from; at--)
    if ((spare[at] ?? 0) < stretch.level) return at
  return undefined
}

/**
 * Spans of one shelf laid over each other: stretches of equal demand, in order. `0..4` and `3..6` ask for one thing on
 * 0..2, two on 3..4 and one on 5..6.
 */
export function stretchesOf(spans: readonly Span[]): Stretch[] {
  const change = new Map<number, number>()
  for (const { from, to } of spans) {
    if (to < from) continue
    change.set(from, (change.get(from) ?? 0) + 1)
    change.set(to + 1, (change.get(to + 1) ?? 0) - 1)
  }
  const turns = [...change].filter(([, step]) => step !== 0).sort(([a], [b]) => a - b)
  const stretches: Stretch[] = []
  let level = 0
  turns.forEach(([at, step], index) => {
    level += step
    const next = turns[index + 1]
    if (level > 0 && next) stretches.push({ from: at, to: next[0] - 1, level })
  })
  return stretches
}
