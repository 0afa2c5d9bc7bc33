/**
 * ln Σ exp(x_i), computed around the largest term so that neither end overflows.
 *
 * @param logs any numbers; −Infinity stands for a term of 0.
 * @returns −Infinity for an empty list or one of zeros alone.
 */
export function logSumExp(logs: readonly number[]): number {
  let largest = -Infinity;
  for (const log of logs) if (log > largest) largest = log;
  if (largest === -Infinity) return -Infinity;
  let sum = 0;
  for (const log of logs) sum += Math.exp(log - largest);
  return largest + Math.log(sum);
}
