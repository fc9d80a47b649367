import { densityOfSpirit, massFractionOfStrength } from './ethanol-density.ts'
import { within } from './range.ts'
import { brixOfDensity, densityOfSolution } from './sucrose-density.ts'
import { waterDensity } from './water-density.ts'

/** Cubic expansion of hydrometer glass, 1/°C. Source: ISO 1768:1975 clause 3 (a convention). */
export const GLASS_EXPANSION_PER_C = 25e-6

/** 60 °F, the mark on many older instruments. */
export const SIXTY_FAHRENHEIT_C = 140 / 9

const READING = [0.98, 1.16] as const
const LIQUID_C = [5, 40] as const
const CALIBRATION_C = [10, 30] as const

/** What the liquid weighs at T, from what an instrument marked for `calibrationC` shows in it. kg/m³. */
function densityShown(reading: number, temperatureC: number, calibrationC: number): number {
  return (reading * waterDensity(calibrationC)) / (1 + GLASS_EXPANSION_PER_C * (temperatureC - calibrationC))
}

export interface HydrometerReading {
  reading: number
  temperatureC: number
  calibrationTemperatureC?: number
  offset?: number
}

/**
 * What the hydrometer would show in the same must at the temperature it is marked for.
 *
 * The instrument's own offset is added first. Then the density at T is found from the reading and the expansion of the
 * glass, turned into a composition, and that composition is weighed at the calibration temperature. Correcting with
 * water's expansion alone falls 1.3 points short at 1.100 and 40 °C.
 *
 * @param reading 0.980 to 1.160, as read
 * @param temperatureC of the liquid, 5 to 40 °C
 * @param calibrationTemperatureC printed on the instrument, 10 to 30 °C; 20 unless said, 15.56 for 60 °F
 * @param offset what to add to every reading of this instrument, -0.02 to 0.02
 * @returns specific gravity at the calibration temperature, good to about 0.001–0.002 on a shared instrument
 * @throws RangeError outside those ranges
 * Source: ICUMSA SPS-4 sucrose, Tanaka water, ISO 1768 glass.
 * `correctGravity({ reading: 1.1, temperatureC: 25 })` is 1.10157.
 */
export function correctGravity({
  reading,
  temperatureC,
  calibrationTemperatureC = 20,
  offset = 0,
}: HydrometerReading): number {
  within('reading', reading, ...READING)
  within('temperatureC', temperatureC, ...LIQUID_C)
  within('calibrationTemperatureC', calibrationTemperatureC, ...CALIBRATION_C)
  within('offset', offset, -0.02, 0.02)
  const density = densityShown(reading + offset, temperatureC, calibrationTemperatureC)
  const brix = brixOfDensity(density, temperatureC)
  return densityOfSolution(brix, calibrationTemperatureC) / waterDensity(calibrationTemperatureC)
}

/**
 * The same for a finished, dry drink, which expands with its alcohol and not with its sugar.
 *
 * @param reading 0.960 to 1.010
 * @param temperatureC 5 to 40 °C
 * @param abvPercent 0 to 25
 * @param calibrationTemperatureC 10 to 30 °C, 20 unless said
 * @returns specific gravity at the calibration temperature
 * @throws RangeError outside those ranges
 * Source: OIML R 22 and ISO 1768. At 12 %vol and 30 °C it adds 2.8 points, where a must of 1.000 takes 2.3.
 */
export function correctDryGravity({
  reading,
  temperatureC,
  abvPercent,
  calibrationTemperatureC = 20,
}: {
  reading: number
  temperatureC: number
  abvPercent: number
  calibrationTemperatureC?: number
}): number {
  within('reading', reading, 0.96, 1.01)
  within('temperatureC', temperatureC, ...LIQUID_C)
  within('abvPercent', abvPercent, 0, 25)
  within('calibrationTemperatureC', calibrationTemperatureC, ...CALIBRATION_C)
  const p = massFractionOfStrength(abvPercent / 100)
  const shrinks = densityOfSpirit(p, calibrationTemperatureC) / densityOfSpirit(p, temperatureC)
  return (reading * shrinks) / (1 + GLASS_EXPANSION_PER_C * (temperatureC - calibrationTemperatureC))
}

/**
 * What to add to every reading of an instrument, found by floating it in plain water.
 *
 * @param waterReading what it shows, 0.980 to 1.020
 * @param waterTemperatureC 5 to 40 °C
 * @param calibrationTemperatureC printed on it, 10 to 30 °C, 20 unless said
 * @returns SG to add; 0 for a true instrument
 * @throws RangeError outside those ranges
 * Source: Tanaka water, ISO 1768 glass. An instrument marked for 20 °C that shows 1.002 in water at 20 °C needs -0.002.
 */
export function hydrometerOffset({
  waterReading,
  waterTemperatureC,
  calibrationTemperatureC = 20,
}: {
  waterReading: number
  waterTemperatureC: number
  calibrationTemperatureC?: number
}): number {
  within('waterReading', waterReading, 0.98, 1.02)
  within('waterTemperatureC', waterTemperatureC, ...LIQUID_C)
  within('calibrationTemperatureC', calibrationTemperatureC, ...CALIBRATION_C)
  const glass = 1 + GLASS_EXPANSION_PER_C * (waterTemperatureC - calibrationTemperatureC)
  return (waterDensity(waterTemperatureC) * glass) / waterDensity(calibrationTemperatureC) - waterReading
}
