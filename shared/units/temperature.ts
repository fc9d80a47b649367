export const TEMPERATURE_UNITS = ['C', 'F'] as const
export type TemperatureUnit = (typeof TEMPERATURE_UNITS)[number]

/** °C of a temperature in a unit. `toCelsius(68, 'F')` is 20. */
export const toCelsius = (degrees: number, unit: TemperatureUnit): number =>
  unit === 'C' ? degrees : ((degrees - 32) * 5) / 9

/** A temperature in a unit, of °C; the inverse of `toCelsius`. */
export const fromCelsius = (celsius: number, unit: TemperatureUnit): number =>
  unit === 'C' ? celsius : (celsius * 9) / 5 + 32
