import { FG_PRIOR_SG, FIT_ERROR_SG, OG_PRIOR_SG, RATE_PRIOR } from './judgement.ts'

/**
 * Two shapes a ferment can take, each with a rate (1/day) and a delay (rate × days): the share of the fall still to come.
 * Logistic: Speers, Rogers and Smith 2003, J. Inst. Brew. 109:229. Gompertz: Zwietering's form, from memory; it has the
 * longer tail, and the truth lies between the two.
 */
export const SHAPES = ['logistic', 'gompertz'] as const
export type Shape = (typeof SHAPES)[number]

export function shareLeft(shape: Shape, x: number): number {
  return shape === 'logistic' ? 1 / (1 + Math.exp(x)) : -Math.expm1(-Math.exp(-x))
}

/** Where the share left is `share`: the inverse of `shareLeft`. */
export function placeOf(shape: Shape, share: number): number {
  return shape === 'logistic' ? Math.log(1 / share - 1) : -Math.log(-Math.log1p(-share))
}

export interface Point {
  /** Days since the start. */
  t: number
  gravity: number
  weight: number
}

export interface Node {
  shape: Shape
  rate: number
  delay: number
  og: number
  fg: number
  weight: number
}

export interface Expectation {
  og: number
  expectedFg: number
}

export function gravityAt(node: Node, t: number): number {
  return node.fg + (node.og - node.fg) * shareLeft(node.shape, node.rate * t - node.delay)
}

const SIDE = 15
const NODES = SIDE * SIDE
const STAGES = 3
const LN_RATE = [Math.log(0.02), Math.log(4)] as const
const DELAY: Record<Shape, readonly [number, number]> = { logistic: [-2, 9], gompertz: [-2, 5] }
const DELAY_PRIOR: Record<Shape, readonly [number, number]> = { logistic: [3, 1.1], gompertz: [1.7, 0.8] }
/** How far below the best a node may lie and still count when the grid is drawn closer. */
const CUT = 8

// One set of arrays for all fits: nothing is allocated inside the loops.
const logWeight = new Float64Array(NODES)
const nodeOg = new Float64Array(NODES)
const nodeFg = new Float64Array(NODES)
/** More readings than a season of twice a day; of a longer list only the last are used. */
export const MOST_POINTS = 600
const growth = new Float64Array(MOST_POINTS)
const weights = new Float64Array(MOST_POINTS)
const excess = new Float64Array(MOST_POINTS)

interface Box {
  rate: readonly [number, number]
  delay: readonly [number, number]
}

const step = (range: readonly [number, number], i: number): number =>
  range[0] + ((range[1] - range[0]) * i) / (SIDE - 1)

/**
 * Weighted least squares for og and fg at each node of rate and delay (the model is linear in the two), and the log of the
 * node's evidence.
 */
function scan(shape: Shape, points: readonly Point[], expected: Expectation, box: Box): void {
  const [delayMean, delaySd] = DELAY_PRIOR[shape]
  const noise = 1 / FIT_ERROR_SG ** 2
  const ogWeight = 1 / OG_PRIOR_SG ** 2
  const fgWeight = 1 / FG_PRIOR_SG ** 2
  const fall = expected.og - expected.expectedFg
  const count = Math.min(points.length, MOST_POINTS)
  for (let n = 0; n < count; n++) {
    const point = points[n]
    weights[n] = noise * (point?.weight ?? 0)
    excess[n] = (point?.gravity ?? 0) - expected.expectedFg
  }
  for (let i = 0; i < SIDE; i++) {
    const lnRate = step(box.rate, i)
    const rate = Math.exp(lnRate)
    for (let n = 0; n < count; n++) growth[n] = Math.exp(rate * (points[n]?.t ?? 0))
    const ratePrior = ((lnRate - RATE_PRIOR.mean) / RATE_PRIOR.sd) ** 2
    for (let j = 0; j < SIDE; j++) {
      const delay = step(box.delay, j)
      // Deviations from what was expected, so that sums of squares lose no digits; e^(rate t) is made once a row.
      let a = ogWeight
      let b = 0
      let c = fgWeight
      let p = 0
      let q = 0
      let yy = 0
      const lag = Math.exp(-delay)
      for (let n = 0; n < count; n++) {
        const grown = (growth[n] ?? 0) * lag
        const s = shape === 'logistic' ? 1 / (1 + grown) : 1 - Math.exp(-1 / grown)
        const w = weights[n] ?? 0
        const y = (excess[n] ?? 0) - fall * s
        const rest = 1 - s
        a += w * s * s
        b += w * s * rest
        c += w * rest * rest
        p += w * s * y
        q += w * rest * y
        yy += w * y * y
      }
      const det = a * c - b * b
      const dOg = (p * c - q * b) / det
      const dFg = (a * q - b * p) / det
      const chi = yy - dOg * p - dFg * q
      const at = i * SIDE + j
      nodeOg[at] = expected.og + dOg
      nodeFg[at] = expected.expectedFg + dFg
      logWeight[at] = -0.5 * (chi + ratePrior + ((delay - delayMean) / delaySd) ** 2 + Math.log(det))
    }
  }
}

/** The part of the grid that holds the belief, one step wider on each side. */
function closer(box: Box): Box {
  let best = Number.NEGATIVE_INFINITY
  for (let n = 0; n < NODES; n++) best = Math.max(best, logWeight[n] ?? best)
  let [i0, i1, j0, j1] = [SIDE, -1, SIDE, -1]
  for (let n = 0; n < NODES; n++) {
    if ((logWeight[n] ?? 0) < best - CUT) continue
    const i = Math.floor(n / SIDE)
    const j = n % SIDE
    i0 = Math.min(i0, i)
    i1 = Math.max(i1, i)
    j0 = Math.min(j0, j)
    j1 = Math.max(j1, j)
  }
  return {
    rate: [step(box.rate, Math.max(0, i0 - 1)), step(box.rate, Math.min(SIDE - 1, i1 + 1))],
    delay: [step(box.delay, Math.max(0, j0 - 1)), step(box.delay, Math.min(SIDE - 1, j1 + 1))],
  }
}

/** The belief about a ferment's course: nodes of both shapes with weights that add up to 1, heaviest first. */
export function fitNodes(points: readonly Point[], expected: Expectation): Node[] {
  const nodes: Node[] = []
  for (const shape of SHAPES) {
    let box: Box = { rate: LN_RATE, delay: DELAY[shape] }
    for (let stage = 1; stage < STAGES; stage++) {
      scan(shape, points, expected, box)
      box = closer(box)
    }
    scan(shape, points, expected, box)
    const cell = (box.rate[1] - box.rate[0]) * (box.delay[1] - box.delay[0])
    const scale = Math.log(cell / DELAY_PRIOR[shape][1])
    for (let i = 0; i < SIDE; i++) {
      const rate = Math.exp(step(box.rate, i))
      for (let j = 0; j < SIDE; j++) {
        const at = i * SIDE + j
        const og = nodeOg[at] ?? expected.og
        const fg = nodeFg[at] ?? expected.expectedFg
        nodes.push({ shape, rate, delay: step(box.delay, j), og, fg, weight: (logWeight[at] ?? 0) + scale })
      }
    }
  }
  const best = nodes.reduce((most, node) => Math.max(most, node.weight), Number.NEGATIVE_INFINITY)
  let sum = 0
  for (const node of nodes) {
    node.weight = Math.exp(node.weight - best)
    sum += node.weight
  }
  for (const node of nodes) node.weight /= sum
  return nodes.filter((node) => node.weight > 1e-5).sort((x, y) => y.weight - x.weight)
}
