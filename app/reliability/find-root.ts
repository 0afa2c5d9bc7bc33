/**
 * A root of a continuous function between two points where its signs differ, by Brent's method.
 *
 * @param f the function; finite everywhere between `low` and `high`.
 * @param tolerance absolute, on the root.
 * @throws RangeError when f(low) and f(high) have the same sign or are not numbers.
 *
 * Source: Brent, Algorithms for Minimization without Derivatives (1973), chapter 4.
 */
export function findRoot(f: (x: number) => number, low: number, high: number, tolerance = 1e-13): number {
  let a = low;
  let b = high;
  let fa = f(a);
  let fb = f(b);
  if (fa === 0) return a;
  if (fb === 0) return b;
  if (!(fa < 0 !== fb < 0) || Number.isNaN(fa) || Number.isNaN(fb)) {
    throw new RangeError(`no change of sign between ${low} and ${high}: ${fa} and ${fb}`);
  }
  let c = a;
  let fc = fa;
  let step = b - a;
  let previousStep = step;
  for (let iteration = 0; iteration < 200; iteration += 1) {
    if (Math.abs(fc) < Math.abs(fb)) {
      [a, b, c] = [b, c, b];
      [fa, fb, fc] = [fb, fc, fb];
    }
    const limit = 2 * Number.EPSILON * Math.abs(b) + tolerance / 2;
    const half = (c - b) / 2;
    if (Math.abs(half) <= limit || fb === 0) return b;
    if (Math.abs(previousStep) < limit || Math.abs(fa) <= Math.abs(fb)) {
      step = half;
      previousStep = half;
    } else {
      // Inverse quadratic interpolation, or the secant where only two points differ.
      const s = fb / fa;
      let p: number;
      let q: number;
      if (a === c) {
        p = 2 * half * s;
        q = 1 - s;
      } else {
        const r = fb / fc;
        const t = fa / fc;
        p = s * (2 * half * t * (t - r) - (b - a) * (r - 1));
        q = (t - 1) * (r - 1) * (s - 1);
      }
      if (p > 0) q = -q;
      else p = -p;
      if (2 * p < Math.min(3 * half * q - Math.abs(limit * q), Math.abs(previousStep * q))) {
        previousStep = step;
        step = p / q;
      } else {
        step = half;
        previousStep = half;
      }
    }
    a = b;
    fa = fb;
    b += Math.abs(step) > limit ? step : Math.sign(half) * limit;
    fb = f(b);
    if (fb < 0 === fc < 0) {
      c = a;
      fc = fa;
      step = b - a;
      previousStep = step;
    }
  }
  return b;
}
