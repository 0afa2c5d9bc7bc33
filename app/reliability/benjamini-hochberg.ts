/**
 * Which of many p-values pass when the share of false discoveries among those passed is held to `level`:
 * with K sorted values, all up to the largest k with p_(k) ≤ k level / K.
 *
 * @param pValues one a question asked, in [0, 1]; K counts them all.
 * @returns for each p-value, in its place, whether it passes.
 *
 * Source: Benjamini & Hochberg 1995.
 */
export function benjaminiHochberg(pValues: readonly number[], level: number): boolean[] {
  const sorted = Float64Array.from(pValues).sort();
  let threshold = -1;
  for (const [index, p] of sorted.entries()) {
    if (p <= ((index + 1) * level) / sorted.length) threshold = p;
  }
  return pValues.map((p) => p <= threshold);
}
