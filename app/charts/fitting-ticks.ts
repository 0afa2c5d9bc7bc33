import { textWidth } from './plot-frame';

export interface Ticks {
  readonly values: readonly number[];
  readonly format: (value: number) => string;
}

interface TickedScale {
  (value: number): number;
  ticks: (count: number) => number[];
}

const GAP = 14;

/** As many ticks along x, at most about eight, as have labels with a gap between them. */
export function fittingTicks(scale: TickedScale, width: number, format: (value: number) => string): Ticks {
  for (let count = 8; count > 1; count -= 1) {
    const values = scale.ticks(count);
    const widest = Math.max(0, ...values.map((value) => textWidth(format(value))));
    const pitch = values.length > 1 ? Math.abs(scale(values[1] ?? 0) - scale(values[0] ?? 0)) : width;
    if (pitch >= widest + GAP) return { values, format };
  }
  return { values: scale.ticks(1).slice(0, 1), format };
}
