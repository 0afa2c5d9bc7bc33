import { NOT_KNOWN } from './number';

const THIN = '\u202f';
const MINUS = '\u2212';

interface Currency {
  readonly symbol: string;
  readonly minorDigits: number;
}

const currencies = new Map<string, Currency>();

function currencyOf(code: string): Currency {
  let currency = currencies.get(code);
  if (currency === undefined) {
    const format = new Intl.NumberFormat('en-GB', { style: 'currency', currency: code });
    const symbol = format.formatToParts(0).find((part) => part.type === 'currency')?.value ?? code;
    currency = { symbol, minorDigits: format.resolvedOptions().maximumFractionDigits ?? 2 };
    currencies.set(code, currency);
  }
  return currency;
}

/** "£" stands before the figure, a code of letters ("CHF") before it with a thin space. */
function withSymbol(symbol: string, figure: string, negative: boolean): string {
  const gap = /\p{L}$/u.test(symbol) ? THIN : '';
  return `${negative ? MINUS : ''}${symbol}${gap}${figure}`;
}

function figureOf(value: number, decimals: number): string {
  const [whole = '', fraction] = value.toFixed(decimals).split('.');
  const grouped = whole.replace(/\B(?=(\d{3})+$)/g, THIN);
  return fraction === undefined ? grouped : `${grouped}.${fraction}`;
}

/**
 * Money from integer minor units and an ISO 4217 code: 190 000 GBP is "£1 900", 19 050 GBP is "£190.50".
 * Pence are shown where there are any, or where `minor` is 'always' (columns that must line up).
 *
 * @throws RangeError for something that is no currency code.
 */
export function formatMoney(
  amountMinor: number,
  currencyCode: string,
  minor: 'where-any' | 'always' | 'never' = 'where-any',
): string {
  const { symbol, minorDigits } = currencyOf(currencyCode);
  if (!Number.isFinite(amountMinor)) return NOT_KNOWN;
  const scale = 10 ** minorDigits;
  const whole = Math.round(Math.abs(amountMinor));
  const decimals = minor === 'always' || (minor === 'where-any' && whole % scale !== 0) ? minorDigits : 0;
  const figure = figureOf(whole / scale, decimals);
  const isZero = !/[1-9]/.test(figure);
  return withSymbol(symbol, figure, amountMinor < 0 && !isZero);
}

/** Money for an axis or a tight place, to three digits: "£950", "£20k", "£1.25m". */
export function formatMoneyShort(amountMinor: number, currencyCode: string): string {
  const { symbol, minorDigits } = currencyOf(currencyCode);
  if (!Number.isFinite(amountMinor)) return NOT_KNOWN;
  const amount = Number((Math.abs(amountMinor) / 10 ** minorDigits).toPrecision(3));
  const [divisor, suffix] =
    amount >= 1e9 ? [1e9, 'bn'] : amount >= 1e6 ? [1e6, 'm'] : amount >= 1e3 ? [1e3, 'k'] : [1, ''];
  const scaled = Number((amount / divisor).toFixed(2));
  const figure = divisor === 1 && !Number.isInteger(scaled) ? scaled.toFixed(minorDigits) : String(scaled);
  return withSymbol(symbol, `${figure}${suffix}`, amountMinor < 0 && scaled !== 0);
}
