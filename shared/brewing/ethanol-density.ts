import { within } from './range.ts'
import { solve } from './root.ts'

// OIML R 22 = Directive 76/766/EEC: ethanol in water, mass fraction 0–1, −20 to 40 °C.
const A = [
  9.9820123e2, -1.929769495e2, 3.891238958e2, -1.668103923e3, 1.352215441e4, -8.829278388e4, 3.062874042e5,
  -6.138381234e5, 7.470172998e5, -5.478461354e5, 2.234460334e5, -3.903285426e4,
]
const B = [-2.0618513e-1, -5.2682542e-3, 3.6130013e-5, -3.8957702e-7, 7.169354e-9, -9.9739231e-11]
const C = [
  [
    1.693443461530087e-1, -1.046914743455169e1, 7.196353469546523e1, -7.047478054272792e2,
    3.924090430035045e3, -1.210164659068747e4, 2.248646550400788e4, -2.605562982188164e4, 1.852373922069467e4,
    -7.420201433430137e3, 1.285617841998974e3,
  ],
  [
    -1.19301300505701e-2, 2.517399633803461e-1, -2.170575700536993, 1.353034988843029e1, -5.029988758547014e1,
    1.09635566657757e2, -1.422753946421155e2, 1.08043594285623e2, -4.414153236817392e1, 7.442971530188783,
  ],
  [
    -6.802995733503803e-4, 1.876837790289664e-2, -2.002561813734156e-1, 1.02299296671922, -2.895696483903638,
    4.810060584300675, -4.672147440794683, 2.458043105903461, -5.411227621436812e-1,
  ],
  [4.075376675622027e-6, -8.76305857347111e-6, 6.515031360099368e-6, -1.51578483698721e-6],
  [-2.788074354782409e-8, 1.345612883493354e-8],
]

function polynomial(coefficients: readonly number[], x: number): number {
  let sum = 0
  for (let i = coefficients.length - 1; i >= 0; i--) sum = sum * x + (coefficients[i] ?? 0)
  return sum
}

/** Density of ethanol and water, kg/m³, without guards. `p` is the mass fraction of ethanol. */
export function densityOfSpirit(p: number, temperatureC: number): number {
  const d = temperatureC - 20
  let density = polynomial(A, p)
  if (d !== 0) {
    density += d * polynomial(B, d)
    for (let i = 0, power = d; i < C.length; i++, power *= d) density += p * polynomial(C[i] ?? [], p) * power
  }
  return density
}

/** Pure ethanol at 20 °C, kg/m³ (sum of the OIML R 22 constants). */
export const ETHANOL_AT_20 = densityOfSpirit(1, 20)

/** Mass fraction of ethanol in a sugar-free mixture of a strength by volume (a fraction) at 20 °C. */
export function massFractionOfStrength(strength: number): number {
  return solve((p) => (p * densityOfSpirit(p, 20)) / ETHANOL_AT_20, strength, 0, 1)
}

/**
 * Density of ethanol and water, no sugar.
 *
 * @param abvPercent 0 to 100 % by volume at 20 °C
 * @param temperatureC 0 to 40 °C
 * @returns kg/m³
 * @throws RangeError outside those ranges
 * Source: OIML R 22. `ethanolWaterDensity({ abvPercent: 12, temperatureC: 20 })` is 982.36. Holds for distillates
 * and for drinks that are fully dry; its water (998.2012) is 0.0055 kg/m³ under Tanaka's.
 */
export function ethanolWaterDensity({
  abvPercent,
  temperatureC,
}: {
  abvPercent: number
  temperatureC: number
}): number {
  within('abvPercent', abvPercent, 0, 100)
  within('temperatureC', temperatureC, 0, 40)
  return densityOfSpirit(massFractionOfStrength(abvPercent / 100), temperatureC)
}
