import { CO2_LIMIT_15MIN_PPM, CO2_LIMIT_8H_PPM, OUTDOOR_CO2_PPM, PEAK_BATCH } from './judgement.ts'
import { CO2_GRAMS_PER_MOL } from './carbonation.ts'
import { within } from './range.ts'

/** CO2 for each point of gravity, g/L: 0.98–1.00 by the density balance. */
export const CO2_GRAMS_PER_LITRE_POINT = 0.985
/** Litres of gas in a mole at 20 °C and 1 atm. */
const LITRES_PER_MOL_20C = 24.055

/**
 * CO2 a batch gives off, in litres of gas at 20 °C.
 *
 * @param volumeLitres 0 to 10,000
 * @param points of gravity it falls, 0 to 200
 * @throws RangeError outside those ranges
 * Source: 0.985 g/L a point (Balling over the density balance). 5 L and 68 points: 184 L.
 */
export function co2Litres({ volumeLitres, points }: { volumeLitres: number; points: number }): {
  litres: number
} {
  within('volumeLitres', volumeLitres, 0, 10_000)
  within('points', points, 0, 200)
  return {
    litres: (volumeLitres * points * CO2_GRAMS_PER_LITRE_POINT * LITRES_PER_MOL_20C) / CO2_GRAMS_PER_MOL,
  }
}

export interface RoomBatch {
  volumeLitres: number
  /** Gravity it loses in a day now. */
  pointsPerDay: number
}

/**
 * CO2 that settles in a room where batches work, well mixed.
 *
 * @param batches how many 5 L batches at their peak (0 to 10,000), or a list of `{ volumeLitres, pointsPerDay }`
 * @param roomM3 1 to 100,000
 * @param airChangesPerHour 0.01 to 100; a shut room has about 0.5
 * @returns `ppm` with the 420 of the air outside, the rise, and the share of the 8-hour limit (5,000 ppm)
 * @throws RangeError outside those ranges
 * Source: steady balance; EH40 limits. One peak batch in 30 m³ at 0.5 changes an hour raises it by about 150 ppm.
 * CO2 is heavier than air: near the floor of a cellar it is more.
 */
export function roomCo2({
  batches,
  roomM3,
  airChangesPerHour,
}: {
  batches: number | readonly RoomBatch[]
  roomM3: number
  airChangesPerHour: number
}): {
  ppm: number
  risePpm: number
  shareOfLimit: number
  verdict: 'fine' | 'open-a-window' | 'keep-out'
  reasons: string[]
} {
  within('roomM3', roomM3, 1, 100_000)
  within('airChangesPerHour', airChangesPerHour, 0.01, 100)
  const litresPerDay =
    typeof batches === 'number'
      ? within('batches', batches, 0, 10_000) *
        PEAK_BATCH.sharePerDay *
        co2Litres({ volumeLitres: PEAK_BATCH.volumeLitres, points: PEAK_BATCH.dropPoints }).litres
      : batches.reduce(
          (sum, batch) =>
            sum + co2Litres({ volumeLitres: batch.volumeLitres, points: batch.pointsPerDay }).litres,
          0,
        )
  const risePpm = (litresPerDay / 24 / (roomM3 * 1000 * airChangesPerHour)) * 1e6
  const ppm = OUTDOOR_CO2_PPM + risePpm
  const verdict =
    ppm >= CO2_LIMIT_15MIN_PPM ? 'keep-out' : ppm >= CO2_LIMIT_8H_PPM / 2 ? 'open-a-window' : 'fine'
  return {
    ppm,
    risePpm,
    shareOfLimit: ppm / CO2_LIMIT_8H_PPM,
    verdict,
    reasons: ['Taken as well mixed. The gas is heavier than air and lies deeper near the floor.'],
  }
}
