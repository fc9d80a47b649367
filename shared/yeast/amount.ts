/** Amounts are kept as whole thousandths, so that what is left is an exact sum. */
export const toMilli = (amount: number) => Math.round(amount * 1000)
export const fromMilli = (milli: number) => milli / 1000

/** As a person would weigh it: `3.2`, `0.45`, `120`. */
export function amountText(amount: number): string {
  const places = amount >= 20 ? 0 : amount >= 1 ? 1 : 2
  return String(Number(amount.toFixed(places)))
}
