/**
 * Solves `f(x) = target` for a rising or falling `f` by secant steps kept inside a bracket.
 * The answer is exact to about 1e-13 of the bracket; a target outside it gives the nearer end.
 */
export function solve(f: (x: number) => number, target: number, low: number, high: number): number {
  let a = low
  let b = high
  let fa = f(a) - target
  let fb = f(b) - target
  if (fa === 0) return a
  if (fb === 0) return b
  if (fa > 0 === fb > 0) return Math.abs(fa) < Math.abs(fb) ? a : b
  for (let step = 0; step < 100 && Math.abs(b - a) > 1e-13 * Math.max(1, Math.abs(b)); step++) {
    // False position, pulled to the middle every third step so that no end can stick.
    let x = step % 3 === 2 ? (a + b) / 2 : b - (fb * (b - a)) / (fb - fa)
    if (!(x > Math.min(a, b) && x < Math.max(a, b))) x = (a + b) / 2
    const fx = f(x) - target
    if (fx === 0) return x
    if (fx > 0 === fa > 0) {
      a = x
      fa = fx
    } else {
      b = x
      fb = fx
    }
  }
  return Math.abs(fa) < Math.abs(fb) ? a : b
}
