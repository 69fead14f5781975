/** Monotone piecewise cubic interpolation (PCHIP). */

export interface Pchip {
  readonly x: Float64Array
  readonly y: Float64Array
  readonly slope: Float64Array
}

const sameSign = (a: number, b: number) => a * b > 0

/** Three-point end slope, limited so that the curve stays monotone. */
function endSlope(h0: number, h1: number, m0: number, m1: number): number {
  const slope = ((2 * h0 + h1) * m0 - h0 * m1) / (h0 + h1)
  if (!sameSign(slope, m0)) return 0
  if (!sameSign(m0, m1) && Math.abs(slope) > 3 * Math.abs(m0)) return 3 * m0
  return slope
}

/**
 * Cubic interpolant that never overshoots its points.
 * Equation: inner slopes are harmonic means of the neighbouring secants weighted by the interval lengths, 0 where the
 * secants change sign; end slopes are three-point, limited. Two points give a straight line.
 * @param x - abscissas, strictly rising, at least two
 * @param y - ordinates, as many
 * @returns the interpolant, for `pchipAt`
 * Source: F. N. Fritsch and J. Butland, "A method for constructing local monotone piecewise cubic interpolants",
 * SIAM J. Sci. Stat. Comput. 5 (1984), 300-304; end slopes as in C. Moler, Numerical Computing with MATLAB (2004), 3.4.
 * Example (computed here): points (0, 0), (1, 1), (2, 4) give 0.3125 at 0.5.
 */
export function makePchip(x: ArrayLike<number>, y: ArrayLike<number>): Pchip {
  const n = x.length
  const curve = {
    x: Float64Array.from(x),
    y: Float64Array.from(y),
    slope: new Float64Array(n),
  }
  const h = (k: number) => curve.x[k + 1]! - curve.x[k]!
  const secant = (k: number) => (curve.y[k + 1]! - curve.y[k]!) / h(k)
  if (n === 2) {
    curve.slope.fill(secant(0))
    return curve
  }
  for (let k = 1; k < n - 1; k++) {
    const [before, after] = [secant(k - 1), secant(k)]
    if (!sameSign(before, after)) continue
    const w1 = 2 * h(k) + h(k - 1)
    const w2 = h(k) + 2 * h(k - 1)
    curve.slope[k] = (w1 + w2) / (w1 / before + w2 / after)
  }
  curve.slope[0] = endSlope(h(0), h(1), secant(0), secant(1))
  curve.slope[n - 1] = endSlope(h(n - 2), h(n - 3), secant(n - 2), secant(n - 3))
  return curve
}

/**
 * Value of a PCHIP curve; outside its points the end value is held.
 * @param curve - from `makePchip`
 * @param at - abscissa
 * @returns the ordinate
 */
export function pchipAt(curve: Pchip, at: number): number {
  const { x, y, slope } = curve
  const last = x.length - 1
  if (!(at > x[0]!)) return y[0]!
  if (at >= x[last]!) return y[last]!
  let k = 0
  while (at >= x[k + 1]!) k++
  const h = x[k + 1]! - x[k]!
  const t = (at - x[k]!) / h
  const u = 1 - t
  return (
    u * u * ((1 + 2 * t) * y[k]! + t * h * slope[k]!) +
    t * t * ((3 - 2 * t) * y[k + 1]! - u * h * slope[k + 1]!)
  )
}
