/** A share seen in a simulation, with its Monte-Carlo standard error. */
export interface Share {
  readonly share: number;
  readonly standardError: number;
  readonly runs: number;
}

export function shareOf(hits: readonly boolean[]): Share {
  const runs = hits.length;
  const share = hits.filter(Boolean).length / runs;
  return { share, standardError: Math.sqrt((share * (1 - share)) / runs), runs };
}

/** The value below which a share of the sample lies. */
export function quantileOf(values: readonly number[], share: number): number {
  const sorted = values.toSorted((a, b) => a - b);
  return sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))]!;
}
