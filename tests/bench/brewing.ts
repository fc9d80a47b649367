import { pathToFileURL } from 'node:url'
import { correctGravity, fitFermentation, lotBelief, mustFromIngredients } from '#shared/brewing/index'
import { dayOf, instantOf, normal, trueGravity, type Ferment } from '#tests/support/ferments'
import { seeded } from '#tests/support/random'

interface BenchLine {
  name: string
  opsPerSecond: number
  msEach: number
  aimMs: number | undefined
}

/** Median of five rounds, each long enough for the clock, after a warm-up. */
function measure(name: string, work: (round: number) => unknown, aimMs?: number): BenchLine {
  const until = performance.now() + 300
  let kept: unknown
  let calls = 0
  while (performance.now() < until) kept = work(calls++)
  const perRound = Math.max(3, Math.round(calls / 3))
  const rounds: number[] = []
  for (let round = 0; round < 5; round++) {
    const start = performance.now()
    for (let i = 0; i < perRound; i++) kept = work(i)
    rounds.push((performance.now() - start) / perRound)
  }
  if (kept === undefined) throw new Error(`${name} gave nothing`)
  const msEach = rounds.sort((a, b) => a - b)[2] ?? Number.NaN
  return { name, opsPerSecond: 1000 / msEach, msEach, aimMs }
}

const MEAD: Ferment = { shape: 'gompertz', rate: 0.32, delay: 1.6, og: 1.102, fg: 1.002, expectedFg: 1 }

/** Sixty readings over three weeks, one point of noise. */
function sixtyReadings(): { at: string; gravity: number }[] {
  const random = seeded(60).next
  return Array.from({ length: 60 }, (_, i) => {
    const days = 0.2 + (21 * i) / 59
    return { at: instantOf(days), gravity: trueGravity(MEAD, days) + 0.001 * normal(random) }
  })
}

const LINES = [
  { grams: 1200, waterFraction: 0.171, solubleFraction: 0.829, fermentableFraction: 0.96, yanMgPerKg: 20 },
  { grams: 2500, waterFraction: 0.88, solubleFraction: 0.116, fermentableFraction: 0.9, yanMgPerKg: 60 },
  { grams: 400, waterFraction: 0.88, solubleFraction: 0.08, fermentableFraction: 0.7, yanMgPerKg: 90 },
]

/** The four sums that screens and lists ask for most. */
function measured(): BenchLine[] {
  const readings = sixtyReadings()
  const on = dayOf(21)
  const outcomes = [
    { outcome: 'started', hoursToActivity: 14 },
    { outcome: 'slow', hoursToActivity: 40 },
    { outcome: 'none', hoursToActivity: 72 },
  ] as const
  return [
    measure('correctGravity', (i) =>
      correctGravity({ reading: 1.02 + (i % 80) / 1000, temperatureC: 15 + (i % 15) }),
    ),
    measure('mustFromIngredients', (i) =>
      mustFromIngredients({ lines: LINES, volumeLitres: 4.5 + (i % 10) / 20 }),
    ),
    measure('lotBelief, 3 outcomes', () => lotBelief({ estimate: 0.82, low: 0.5, high: 0.95 }, outcomes), 10),
    measure(
      'fitFermentation, 60 readings',
      () => fitFermentation({ readings, og: 1.102, expectedFg: 1, on, pitchedAt: instantOf(0) }),
      5,
    ),
  ]
}

function print(lines: readonly BenchLine[]): void {
  for (const line of lines) {
    const aim = line.aimMs === undefined ? '' : `  (aim: under ${line.aimMs} ms)`
    const rate = Math.round(line.opsPerSecond).toLocaleString('en-GB')
    console.log(`${line.name.padEnd(30)} ${rate.padStart(10)} ops/s  ${line.msEach.toFixed(4)} ms each${aim}`)
  }
}

/** Measures and prints. */
export function run(): void {
  print(measured())
}

if (process.argv[1] !== undefined && import.meta.url === pathToFileURL(process.argv[1]).href) run()
