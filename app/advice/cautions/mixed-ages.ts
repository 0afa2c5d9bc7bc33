import { formatCount, formatNoun, formatPercent } from '~/format/number';
import type { Caution } from '../conclusion';
import type { CautionFacts } from './caution-facts';

/**
 * Items of unknown age in assets that stand for several: when many positions of mixed ages are pooled, the
 * pooled failures look random even where each item wears out (Drenick 1960; Cox & Smith 1954).
 */
export function mixedAges({ findings, marks }: CautionFacts): Caution | null {
  const { assets, items, itemsOfUnknownAge } = findings.scatter.groups;
  if (itemsOfUnknownAge === 0) return null;
  return {
    code: 'mixed-ages',
    severity: 'caution',
    sentence: `${formatNoun(assets, 'asset stands', 'assets stand')} for several ${marks.itemPlural} at once, and of ${formatCount(items)} ${marks.itemPlural} there the age of ${formatCount(itemsOfUnknownAge)} (${formatPercent(itemsOfUnknownAge / items)}) is not known. Failures of mixed ages look random whether ${marks.itemPlural} wear out or not.`,
    action: `Note the fitting dates of each group, and with every failure the fitting date of the ${marks.itemSingular} that came out. Until then these assets take part in the first question only.`,
  };
}
