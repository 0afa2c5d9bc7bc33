/** Digits after the point in a currency: 2 for GBP, 0 for JPY, 3 for KWD. */
function minorDigits(currencyCode: string): number {
  const format = new Intl.NumberFormat('en-GB', { style: 'currency', currency: currencyCode });
  return format.resolvedOptions().maximumFractionDigits ?? 2;
}

/** Highest amount taken, in minor units: far above any cost of a repair, far below what a double holds. */
export const highestAmountMinor = 999_999_999_999;

/**
 * Reads an amount written with a point or a comma before its decimals and nothing between its thousands
 * but spaces.
 *
 * @returns integer minor units, or undefined for what is no such amount, has more decimals than the
 *   currency, or is above {@link highestAmountMinor}.
 */
export function parseMoney(text: string, currencyCode: string): number | undefined {
  const digits = minorDigits(currencyCode);
  const match = /^(\d{1,15})(?:[.,](\d+))?$/.exec(text.replace(/\s/g, ''));
  if (!match) return undefined;
  const [, whole = '', decimals = ''] = match;
  if (decimals.length > digits) return undefined;
  const minor = Number(whole + decimals.padEnd(digits, '0'));
  return minor <= highestAmountMinor ? minor : undefined;
}

/** An amount as a form field holds it, so that {@link parseMoney} reads back the same: 19050 GBP is "190.50". */
export function moneyFieldText(amountMinor: number, currencyCode: string): string {
  const digits = minorDigits(currencyCode);
  return (amountMinor / 10 ** digits).toFixed(digits);
}

/** An amount in plain decimals for a file, in the currency's main unit; null stays null. */
export function minorToPlain(amountMinor: number | null, currencyCode: string): number | null {
  return amountMinor === null ? null : amountMinor / 10 ** minorDigits(currencyCode);
}
