/** How many decimals a currency has: 2 for GBP, 0 for JPY. RangeError for what is no currency code. */
export function currencyDecimals(currency: string): number {
  return new Intl.NumberFormat('en', { style: 'currency', currency }).resolvedOptions()
    .maximumFractionDigits as number
}

/** Whole minor units in words: `moneyWords(640, 'GBP')` is `£6.40`, `moneyWords(-640, 'GBP')` is `−£6.40`. */
export function moneyWords(minor: number, currency: string): string {
  const value = Math.abs(minor) / 10 ** currencyDecimals(currency)
  const words = new Intl.NumberFormat('en-GB', { style: 'currency', currency }).format(value)
  return minor < 0 ? `\u2212${words}` : words
}

/** For a file that a program reads: `moneyFigures(640, 'GBP')` is `6.40`. */
export function moneyFigures(minor: number, currency: string): string {
  const decimals = currencyDecimals(currency)
  return (minor / 10 ** decimals).toFixed(decimals)
}

/** A price that may be a part of a minor unit: `priceWords(2.3, 'GBP')` is `£0.023`, `priceWords(118.4, 'GBP')` is `£1.18`. */
export function priceWords(minor: number, currency: string): string {
  const decimals = currencyDecimals(currency)
  const maximumFractionDigits = minor < 10 ? decimals + 1 : decimals
  return new Intl.NumberFormat('en-GB', {
    style: 'currency',
    currency,
    minimumFractionDigits: decimals,
    maximumFractionDigits,
  }).format(minor / 10 ** decimals)
}
