/**
 * Root of a function between two arguments at which its signs differ.
 * @param f - continuous function
 * @param a - one end
 * @param b - other end
 * @param fa - f(a)
 * @param fb - f(b), of the other sign or 0
 * @param tolerance - absolute tolerance of the argument
 * @returns argument within tolerance of a sign change
 * Source: T. R. Chandrupatla, "A new hybrid quadratic/bisection algorithm for finding the zero of a nonlinear function
 * without using derivatives", Advances in Engineering Software 28 (1997), 145-149.
 * Example (computed here): x³ - 2 between 1 and 2 has its root at 1.259921.
 */
export function findRoot(
  f: (x: number) => number,
  a: number,
  b: number,
  fa: number,
  fb: number,
  tolerance: number,
): number {
  let [x1, f1, x2, f2] = [a, fa, b, fb]
  let [x3, f3] = [b, fb]
  let t = 0.5
  if (f2 === 0) return x2
  for (let iteration = 0; iteration < 200; iteration++) {
    const x = x1 + t * (x2 - x1)
    const fx = f(x)
    if (Math.sign(fx) === Math.sign(f1)) [x3, f3] = [x1, f1]
    else [x3, f3, x2, f2] = [x2, f2, x1, f1]
    ;[x1, f1] = [x, fx]
    const best = Math.abs(f1) < Math.abs(f2) ? x1 : x2
    const limit = (2 ** -52 * Math.abs(best) + 0.5 * tolerance) / Math.abs(x2 - x1)
    if (limit > 0.5 || f1 === 0) return best
    const xi = (x1 - x2) / (x3 - x2)
    const phi = (f1 - f2) / (f3 - f2)
    t =
      phi ** 2 < xi && (1 - phi) ** 2 < 1 - xi
        ? (f1 / (f2 - f1)) * (f3 / (f2 - f3)) + ((x3 - x1) / (x2 - x1)) * (f1 / (f3 - f1)) * (f2 / (f3 - f2))
        : 0.5
    t = Math.min(1 - limit, Math.max(limit, t))
  }
  return Math.abs(f1) < Math.abs(f2) ? x1 : x2
}
