/** A source of numbers in [0, 1), the same for the same seed. */
export type Random = () => number;

/** Mulberry32, a public-domain generator of 32 bits of state, from memory: good enough for simulation in tests. */
export function seededRandom(seed: number): Random {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 2 ** 32;
  };
}

/** A Weibull life longer than `age`, by inversion of the conditional survival. */
export function weibullLife(random: Random, shape: number, scale: number, age = 0): number {
  return scale * ((age / scale) ** shape - Math.log(1 - random())) ** (1 / shape);
}
