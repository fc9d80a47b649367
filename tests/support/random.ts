/** A small seeded generator (mulberry32), so that a failing history can be run again. */
export function seeded(seed: number) {
  let state = seed >>> 0
  const next = () => {
    state = (state + 0x6d2b79f5) >>> 0
    let mixed = Math.imul(state ^ (state >>> 15), state | 1)
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61)
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4_294_967_296
  }
  return {
    /** From 0 up to, not including, 1. */
    next,
    /** A whole number from `low` to `high`, both included. */
    int: (low: number, high: number) => low + Math.floor(next() * (high - low + 1)),
    chance: (probability: number) => next() < probability,
    pick: <T>(choices: readonly [T, ...T[]] | readonly T[]): T => {
      const chosen = choices[Math.floor(next() * choices.length)]
      if (chosen === undefined) throw new RangeError('nothing to pick from')
      return chosen
    },
  }
}
export type Random = ReturnType<typeof seeded>
