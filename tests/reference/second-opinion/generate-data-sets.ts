import { seededRandom, weibullLife } from '../../support/seeded-random';

/** Number of data sets both sides fit. */
export const dataSetCount = 300;

/**
 * 300 seeded random sets of lives as CSV (set, entry, exit, failed): right-censored, in half of them with
 * late entries, in a third with times rounded until they tie, clock units from 1e−6 to 1e9 of a life, true
 * shapes from 0.5 to 5, 8 to 67 lives.
 */
export function generateDataSets(): string {
  const lines = ['set,entry,exit,failed'];
  for (let set = 1; set <= dataSetCount; set += 1) {
    const random = seededRandom(7919 * set);
    const shape = Math.exp(Math.log(0.5) + random() * Math.log(10));
    const scale = 10 ** (-6 + 15 * random());
    const lives = 8 + Math.floor(60 * random());
    const late = set % 2 === 0;
    const rounding = set % 3 === 0 ? scale / 8 : 0;
    for (let life = 0; life < lives;) {
      const entered = late && random() < 0.6 ? 0.8 * scale * random() : 0;
      const leaves = entered + scale * (0.3 + 1.5 * random());
      const ends = weibullLife(random, shape, scale, entered);
      const [entry, exit] = [rounded(entered, rounding), rounded(Math.min(ends, leaves), rounding)];
      if (!(exit > entry)) continue;
      lines.push(`${set},${entry},${exit},${ends < leaves ? 1 : 0}`);
      life += 1;
    }
  }
  return `${lines.join('\n')}\n`;
}

/** Twelve digits are kept, so that the last bits of a power function do not show in the file. */
function rounded(time: number, step: number): number {
  return Number((step === 0 ? time : Math.round(time / step) * step).toPrecision(12));
}
