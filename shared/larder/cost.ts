/**
 * What a lot is worth while it is used up. `basisMinor` is what `basisMilli` of it cost, as they stood when something was
 * last added; since then it only shrank to `remainingMilli`.
 */
export interface LotValue {
  basisMilli: number
  basisMinor: number
  remainingMilli: number
}

/**
 * Cost of the first `goneMilli` of a whole, in whole minor units, half up. The parts between two such points are
 * differences, so whatever the sizes of the parts they sum to the cost of the whole: 1/3 + 1/3 + 1/3 of 100 is
 * 33 + 34 + 33. Whole numbers only, goneMilli 0 to wholeMilli; exact, since the product can pass 2^53.
 */
function costOfFirst(goneMilli: number, wholeMilli: number, costMinor: number): number {
  if (wholeMilli === 0) return 0
  const twice = 2n * BigInt(costMinor) * BigInt(goneMilli) + BigInt(wholeMilli)
  return Number(twice / (2n * BigInt(wholeMilli)))
}

/** What is left of a lot's cost, minor units: all of it at first, nothing when it is empty. */
export function valueLeftMinor(lot: LotValue): number {
  if (lot.remainingMilli === 0) return 0
  return lot.basisMinor - costOfFirst(lot.basisMilli - lot.remainingMilli, lot.basisMilli, lot.basisMinor)
}

/**
 * Cost of taking `takeMilli` (0 to remaining), minor units. Every draw is within one minor unit of its exact share, and all
 * of them together are within half a unit of theirs: nothing is lost or made up on the way.
 * @throws RangeError when more is taken than is there
 */
export function costOfTakingMinor(lot: LotValue, takeMilli: number): number {
  if (takeMilli < 0 || takeMilli > lot.remainingMilli)
    throw new RangeError(`takeMilli is ${takeMilli}, allowed 0 to ${lot.remainingMilli}`)
  return valueLeftMinor(lot) - valueLeftMinor({ ...lot, remainingMilli: lot.remainingMilli - takeMilli })
}

/** The lot after something was taken. */
export function afterTaking(lot: LotValue, takeMilli: number): LotValue {
  return { ...lot, remainingMilli: lot.remainingMilli - takeMilli }
}

/** The lot after something was put in: what was left and what came are mixed, and share one price from here. */
export function afterAdding(lot: LotValue, addMilli: number, addMinor: number): LotValue {
  const milli = lot.remainingMilli + addMilli
  return { basisMilli: milli, basisMinor: valueLeftMinor(lot) + addMinor, remainingMilli: milli }
}

/** An empty lot, before its first filling. */
export const EMPTY_LOT: LotValue = { basisMilli: 0, basisMinor: 0, remainingMilli: 0 }

/** What `milli` would cost at the price of an earlier lot, minor units, rounded up: an estimate to shop with. */
export function estimateMinor(paid: { costMinor: number; quantityMilli: number }, milli: number): number {
  return Math.ceil((paid.costMinor * milli) / paid.quantityMilli)
}
