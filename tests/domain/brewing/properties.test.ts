import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import {
  abv,
  ABV_METHODS,
  attenuation,
  bottleCount,
  bottlePressureBar,
  bottlingGate,
  brixFromGravity,
  chlorineNeutraliser,
  co2SolubilityGramsPerLitre,
  correctGravity,
  dilute,
  drySurvival,
  fermentableFloor,
  fitFermentation,
  gravityFromBrix,
  gravityFromSugar,
  hoursToActivity,
  hydrometerOffset,
  ingredientForGravity,
  lotBelief,
  molecularSo2,
  mustFromIngredients,
  nitrogenPlan,
  packetViability,
  pitchAdvice,
  primingGrams,
  residualCo2Volumes,
  roomCo2,
  sucroseDensity,
  sugarGramsPerLitre,
  sulphite,
  tabletsPerBottle,
  waterDensity,
} from '#shared/brewing/index'
import { densityOfSolution } from '#shared/brewing/sucrose-density'
import { GLASS_EXPANSION_PER_C } from '#shared/brewing/hydrometer'
import { dayOf, instantOf } from '#tests/support/ferments'

const real = (min: number, max: number) => fc.double({ min, max, noNaN: true })
const og = real(1.02, 1.13)
const holds = fc.assert

// The same cases on every machine; change the seed to look further.
fc.configureGlobal({ seed: 20261014 })

describe('round trips, to 1e-6', () => {
  test('gravity to Brix and back', () => {
    holds(fc.property(real(0.985, 1.2), (sg) => Math.abs(gravityFromBrix(brixFromGravity(sg)) - sg) < 1e-6))
  })

  test('Brix to gravity and back', () => {
    holds(fc.property(real(-4, 45), (brix) => Math.abs(brixFromGravity(gravityFromBrix(brix)) - brix) < 1e-6))
  })

  test('gravity to grams per litre and back', () => {
    holds(fc.property(real(1, 1.2), (sg) => Math.abs(gravityFromSugar(sugarGramsPerLitre(sg)) - sg) < 1e-6))
  })

  test('what an instrument would show in a must, corrected, is that must', () => {
    holds(
      fc.property(real(0, 30), real(5, 40), fc.constantFrom(20, 140 / 9), (brix, t, marked) => {
        const glass = 1 + GLASS_EXPANSION_PER_C * (t - marked)
        const shown = (densityOfSolution(brix, t) * glass) / waterDensity(marked)
        const truth = densityOfSolution(brix, marked) / waterDensity(marked)
        const again = correctGravity({ reading: shown, temperatureC: t, calibrationTemperatureC: marked })
        return Math.abs(again - truth) < 1e-6
      }),
    )
  })

  test('an offset found in water brings that water to 1.000', () => {
    holds(
      fc.property(real(0.992, 1.008), real(5, 35), (waterReading, t) => {
        const offset = hydrometerOffset({ waterReading, waterTemperatureC: t })
        return Math.abs(correctGravity({ reading: waterReading, temperatureC: t, offset }) - 1) < 1e-6
      }),
    )
  })

  test('the amount found for a gravity makes that gravity', () => {
    holds(
      fc.property(real(1.03, 1.13), real(2, 20), (target, volumeLitres) => {
        const lines = [{ grams: 0, waterFraction: 0.17, solubleFraction: 0.83, fermentableFraction: 0.95 }]
        const { grams } = ingredientForGravity({ lines, adjust: 0, target, volumeLitres })
        const made = mustFromIngredients({ lines: [{ ...lines[0]!, grams }], volumeLitres })
        return Math.abs(made.og - target) < 1e-6
      }),
    )
  })

  test('sulphite by weight and by mg/L', () => {
    holds(
      fc.property(
        real(0.5, 100),
        real(0, 200),
        fc.constantFrom('potassium' as const, 'sodium' as const),
        (v, mg, salt) => {
          const { grams } = sulphite({ volumeLitres: v, mgPerLitre: mg, salt })
          return Math.abs(sulphite({ volumeLitres: v, grams, salt }).mgPerLitre - mg) < 1e-6
        },
      ),
    )
  })

  test('priming to a target and counting it again', () => {
    holds(
      fc.property(real(2, 3.5), real(5, 30), real(1, 30), (target, t, litres) => {
        const dose = primingGrams({
          volumeLitres: litres,
          targetVolumes: target,
          temperatureC: t,
          primer: 'sucrose',
        })
        const volumes = dose.residualVolumes + (dose.grams / litres) * (0.51429 / 1.9769)
        return Math.abs(volumes - target) < 1e-3
      }),
    )
  })
})

describe('one rises, the other follows', () => {
  const rising = (low: number, high: number, f: (x: number) => number, sign: 1 | -1 = 1): void =>
    holds(
      fc.property(real(low, high), real(1e-3, 1), (x, share) => {
        const y = x + (high - x) * share
        return y <= x || sign * (f(y) - f(x)) >= -1e-12
      }),
    )

  test('water is lighter the warmer above 4 °C', () => rising(4, 40, waterDensity, -1))
  test('sugar makes denser', () => rising(0, 70, (brix) => sucroseDensity({ brix, temperatureC: 20 })))
  test('a warmer sample is corrected further up', () =>
    rising(5, 40, (temperatureC) => correctGravity({ reading: 1.06, temperatureC })))
  test('a higher reading stays the higher', () =>
    rising(0.99, 1.14, (reading) => correctGravity({ reading, temperatureC: 12 })))
  test('more fall is more alcohol, by every method', () => {
    for (const method of ABV_METHODS) rising(0.995, 1.04, (fg) => abv({ og: 1.06, fg, method }).percent, -1)
  })
  test('more sugar can end drier', () => rising(1.02, 1.15, fermentableFloor, -1))
  test('warm beer holds less gas', () => rising(0, 40, co2SolubilityGramsPerLitre, -1))
  test('and keeps less of it', () => rising(0, 40, residualCo2Volumes, -1))
  test('pressure rises with warmth', () =>
    rising(5, 40, (temperatureC) => bottlePressureBar({ co2Volumes: 2.5, temperatureC })))
  test('pressure rises with gas', () =>
    rising(0.5, 8, (co2Volumes) => bottlePressureBar({ co2Volumes, temperatureC: 20 })))
  test('headspace eases it', () =>
    rising(
      0,
      0.3,
      (headspaceFraction) => bottlePressureBar({ co2Volumes: 2.5, temperatureC: 20, headspaceFraction }),
      -1,
    ))
  test('yeast never comes back to life', () =>
    rising(0, 10, (years) => drySurvival({ years, temperatureC: 12 }), -1))
  test('warmth kills yeast', () =>
    rising(-20, 30, (temperatureC) => drySurvival({ years: 1, temperatureC }), -1))
  test('less life, later start', () =>
    rising(1e-3, 1, (viability) => hoursToActivity({ cellsPerMl: 5e6, viability }), -1))
  test('less life, more to pitch', () =>
    rising(
      0.06,
      1,
      (viability) => pitchAdvice({ form: 'dry', viability, volumeLitres: 5, og: 1.08, use: 'mead' }).grams,
      -1,
    ))
  test('richer must, more nitrogen', () =>
    rising(
      1.02,
      1.15,
      (sg) =>
        nitrogenPlan({ og: sg, volumeLitres: 5, supplyMgPerLitre: 40, demand: 'medium' }).targetMgPerLitre,
    ))
  test('sourer drink, more molecular SO2', () =>
    rising(2.8, 4.5, (ph) => molecularSo2({ freeMgPerLitre: 30, ph }).mgPerLitre, -1))
  test('more batches, more CO2', () =>
    rising(
      0,
      100,
      (batches) => roomCo2({ batches: Math.round(batches), roomM3: 30, airChangesPerHour: 0.5 }).ppm,
    ))
  test('each point still to ferment raises the worst case', () =>
    rising(1, 1.03, (gravity) => {
      const readings = [1, 9].map((day) => ({ at: instantOf(day), gravity, temperatureC: 20 }))
      return bottlingGate({ readings, expectedFg: 1, bottle: 'beer', primer: { kind: 'none' }, on: dayOf(9) })
        .worstCaseVolumes
    }))
})

describe('bands hold their point', () => {
  test('alcohol', () => {
    holds(
      fc.property(og, real(0, 1), fc.constantFrom(...ABV_METHODS), (start, share, method) => {
        const fg = fermentableFloor(start) + (start - fermentableFloor(start)) * share
        const { percent, low, high } = abv({ og: start, fg, method })
        return low <= percent && percent <= high && low >= 0
      }),
    )
  })

  test('a must', () => {
    holds(
      fc.property(real(200, 1500), real(0.05, 0.99), (grams, solids) => {
        const must = mustFromIngredients({
          lines: [{ grams, waterFraction: 1 - solids, solubleFraction: solids, fermentableFraction: 0.9 }],
          volumeLitres: 5,
        })
        return must.low <= must.og && must.og <= must.high
      }),
    )
  })

  test('a packet', () => {
    holds(
      fc.property(
        fc.constantFrom('dry' as const, 'liquid' as const, 'slurry' as const),
        fc.constantFrom('freezer' as const, 'fridge' as const, 'shelf' as const),
        fc.integer({ min: 0, max: 2000 }),
        fc.integer({ min: 0, max: 2000 }),
        (form, storage, days, opened) => {
          const packet = packetViability({
            form,
            storage,
            madeOn: dayOf(0),
            openedOn: dayOf(opened),
            on: dayOf(days),
          })
          const { low, estimate, high } = packet
          return low >= 0 && low <= estimate && estimate <= high && high <= 1
        },
      ),
    )
  })

  test('a lot, whatever happened to it', () => {
    const outcome = fc.record({
      outcome: fc.constantFrom('started' as const, 'slow' as const, 'none' as const),
      hoursToActivity: fc.option(real(1, 200), { nil: undefined }),
    })
    holds(
      fc.property(fc.array(outcome, { maxLength: 8 }), (outcomes) => {
        const { mean, low, high, dead, grid } = lotBelief({}, outcomes)
        const sum = grid.reduce((total, cell) => total + cell.probability, 0)
        return low <= mean && mean <= high && dead >= 0 && dead <= 1 && Math.abs(sum - 1) < 1e-9
      }),
    )
  })

  test('a dose', () => {
    holds(
      fc.property(
        real(0, 1),
        real(1, 30),
        og,
        fc.constantFrom('mead' as const, 'ale' as const, 'lager' as const),
        (v, l, start, use) => {
          const { grams, low, high, activityHours, expectedHoursToActivity } = pitchAdvice({
            form: 'dry',
            viability: v,
            volumeLitres: l,
            og: start,
            use,
          })
          return (
            low <= grams &&
            grams <= high &&
            activityHours.early <= expectedHoursToActivity &&
            expectedHoursToActivity <= activityHours.late
          )
        },
      ),
    )
  })

  test('a finish day and a final gravity', { timeout: 30_000 }, () => {
    const series = fc.array(real(0.99, 1.09), { minLength: 0, maxLength: 12 })
    holds(
      fc.property(series, (gravities) => {
        const readings = gravities.map((gravity, day) => ({ at: instantOf(day * 1.5), gravity }))
        const forecast = fitFermentation({ readings, og: 1.08, expectedFg: 1, on: dayOf(20) })
        const { finishOn, finalGravity, finalGravityBand, residual } = forecast
        if (finishOn && !(finishOn.early <= finishOn.likely && finishOn.likely <= finishOn.late)) return false
        return (
          Number.isFinite(residual) &&
          finalGravityBand.low <= finalGravity &&
          finalGravity <= finalGravityBand.high
        )
      }),
      { numRuns: 60 },
    )
  })
})

describe('agreement and limits', () => {
  test('the four methods of strength agree within 0.45 %vol for beer to strong cider', () => {
    holds(
      fc.property(real(1.035, 1.08), real(0.998, 1.015), (start, fg) => {
        const all = ABV_METHODS.map((method) => abv({ og: start, fg, method }).percent)
        return Math.max(...all) - Math.min(...all) < 0.45
      }),
    )
  })

  test('nothing fermented is no alcohol and no attenuation', () => {
    holds(
      fc.property(og, (start) => {
        const none = attenuation({ og: start, fg: start })
        return (
          ABV_METHODS.every((method) => abv({ og: start, fg: start, method }).percent < 1e-6) &&
          none.real < 1e-6
        )
      }),
    )
  })

  test('at its own temperature an instrument needs no correction', () => {
    holds(
      fc.property(
        real(0.985, 1.15),
        real(12, 28),
        (reading, t) =>
          Math.abs(correctGravity({ reading, temperatureC: t, calibrationTemperatureC: t }) - reading) < 1e-9,
      ),
    )
  })

  test('scale: twice the batch takes twice the mass', () => {
    holds(
      fc.property(real(1, 40), (litres) => {
        const dose = (v: number): number[] => [
          primingGrams({ volumeLitres: v, targetVolumes: 2.5, temperatureC: 20, primer: 'honey' }).grams,
          nitrogenPlan({ og: 1.09, volumeLitres: v, supplyMgPerLitre: 50, demand: 'high' }).grams,
          sulphite({ volumeLitres: v, mgPerLitre: 40, salt: 'potassium' }).grams,
          chlorineNeutraliser({ volumeLitres: v, chlorineMgPerLitre: 1, salt: 'sodium' }).grams,
          pitchAdvice({ form: 'dry', viability: 0.8, volumeLitres: v, og: 1.09, use: 'mead' }).grams,
        ]
        const twice = dose(2 * litres)
        return dose(litres).every((one, index) => Math.abs((twice[index] ?? 0) / one - 2) < 1e-9)
      }),
    )
  })

  test('must: scale changes neither gravity nor strength', () => {
    holds(
      fc.property(real(0.5, 20), (factor) => {
        const must = (k: number) =>
          mustFromIngredients({
            lines: [
              { grams: 900 * k, waterFraction: 0.17, solubleFraction: 0.83, fermentableFraction: 0.95 },
            ],
            volumeLitres: 4.5 * k,
          })
        return Math.abs(must(factor).og - must(1).og) < 1e-9
      }),
    )
  })

  test('blending lies between what is blended, and alcohol is kept', () => {
    holds(
      fc.property(
        real(1, 20),
        real(0, 20),
        real(0.99, 1.1),
        real(0.99, 1.1),
        real(0, 18),
        (a, b, sgA, sgB, strength) => {
          const mix = dilute({ volumeLitres: a, sg: sgA, abvPercent: strength, addLitres: b, addSg: sgB })
          const kept = Math.abs(mix.abvPercent * mix.volumeLitres - strength * a) < 1e-9
          return kept && mix.sg >= Math.min(sgA, sgB) - 1e-12 && mix.sg <= Math.max(sgA, sgB) + 1e-12
        },
      ),
    )
  })

  test('bottles and what is left make up the whole', () => {
    holds(
      fc.property(
        real(0, 100),
        fc.integer({ min: 0, max: 5 }),
        real(0, 0.2),
        fc.integer({ min: 100, max: 5000 }),
        (v, n, loss, ml) => {
          const { bottles, leftLitres, litres } = bottleCount({
            volumeLitres: v,
            rackings: n,
            lossFraction: loss,
            bottleMl: ml,
          })
          return (
            Math.abs((bottles * ml) / 1000 + leftLitres - litres) < 1e-6 &&
            leftLitres < ml / 1000 &&
            litres <= v
          )
        },
      ),
    )
  })

  test('tablets never pass the target by more than 0.4 volumes', () => {
    holds(
      fc.property(
        fc.integer({ min: 200, max: 1500 }),
        real(0.5, 6),
        real(1.5, 3.5),
        real(5, 30),
        (ml, tabletGrams, target, t) => {
          const { count, volumes } = tabletsPerBottle({
            bottleMl: ml,
            tabletGrams,
            targetVolumes: target,
            temperatureC: t,
          })
          return (
            Number.isInteger(count) &&
            count >= 0 &&
            volumes <= Math.max(target, residualCo2Volumes(t)) + 0.4 + 1e-9
          )
        },
      ),
    )
  })

  test('the nitrogen plan never passes the ceiling', () => {
    holds(
      fc.property(
        og,
        real(1, 50),
        real(0, 300),
        fc.constantFrom('low' as const, 'medium' as const, 'high' as const),
        (start, v, supply, demand) => {
          const plan = nitrogenPlan({ og: start, volumeLitres: v, supplyMgPerLitre: supply, demand })
          return plan.gramsPerLitre <= 1 + 1e-12 && plan.feeds.length <= 3
        },
      ),
    )
  })

  test('a gate that blocks is not ready, and one that is ready bears its worst case', () => {
    const readings = fc.array(real(0.992, 1.02), { minLength: 0, maxLength: 6 })
    holds(
      fc.property(
        readings,
        fc.constantFrom('beer' as const, 'pet' as const, 'sparkling' as const, 'swing-top' as const),
        real(0, 12),
        (list, bottle, sugar) => {
          const gate = bottlingGate({
            readings: list.map((gravity, i) => ({ at: instantOf(4 * i), gravity, temperatureC: 20 })),
            expectedFg: 1,
            bottle,
            primer: { kind: 'sucrose', gramsPerLitre: sugar },
            on: dayOf(30),
          })
          return (
            gate.ready === (gate.blocks.length === 0) &&
            (!gate.ready || gate.worstCaseVolumes <= gate.limitVolumes + 1e-9)
          )
        },
      ),
    )
  })

  test('no answer is NaN or minus nothing', () => {
    holds(
      fc.property(og, real(0.1, 60), real(0, 40), (start, litres, t) => {
        const answers = [
          primingGrams({ volumeLitres: litres, targetVolumes: 0, temperatureC: t, primer: 'sucrose' }).grams,
          bottlePressureBar({ co2Volumes: 0, temperatureC: t }),
          nitrogenPlan({ og: start, volumeLitres: litres, supplyMgPerLitre: 1000, demand: 'low' }).grams,
          abv({ og: start, fg: start }).percent,
          bottleCount({ volumeLitres: 0, rackings: 0, lossFraction: 0, bottleMl: 500 }).leftLitres,
        ]
        return answers.every((answer) => Number.isFinite(answer) && !Object.is(answer, -0))
      }),
    )
  })
})

test('every guard names argument, value and range', () => {
  holds(
    fc.property(fc.constantFrom(Number.NaN, Number.POSITIVE_INFINITY, -1e9, 1e9), (wrong) => {
      const calls: (() => unknown)[] = [
        () => waterDensity(wrong),
        () => brixFromGravity(wrong),
        () => correctGravity({ reading: wrong, temperatureC: 20 }),
        () => abv({ og: wrong, fg: 1 }),
        () => residualCo2Volumes(wrong),
        () => bottlePressureBar({ co2Volumes: wrong, temperatureC: 20 }),
        () => molecularSo2({ freeMgPerLitre: 30, ph: wrong }),
        () => roomCo2({ batches: 1, roomM3: wrong, airChangesPerHour: 0.5 }),
        () => dilute({ volumeLitres: wrong, sg: 1, abvPercent: 5, addLitres: 1 }),
      ]
      for (const call of calls) {
        expect(call).toThrow(RangeError)
        expect(call).toThrow(/^\w+ is \S+: allowed /)
      }
    }),
  )
})
