/**
 * Numbers, money, durations and dates as people read them: British English whatever machine renders them,
 * a narrow no-break space between thousands and before a unit sign, a true minus, and never a minus zero.
 * What is not a finite number reads "not known".
 */

const THIN = '\u202f';
const MINUS = '\u2212';
const LOCALE = 'en-GB';

export const NOT_KNOWN = 'not known';

const formatters = new Map<string, Intl.NumberFormat>();

function numberFormat(options: Intl.NumberFormatOptions): Intl.NumberFormat {
  const key = JSON.stringify(options);
  let format = formatters.get(key);
  if (format === undefined) {
    format = new Intl.NumberFormat(LOCALE, { ...options, signDisplay: 'negative' });
    formatters.set(key, format);
  }
  return format;
}

function spell(value: number, options: Intl.NumberFormatOptions): string {
  // A page spells hundreds of numbers: in British English a comma only ever groups and a hyphen only ever negates.
  return numberFormat(options).format(value).replaceAll(',', THIN).replace('-', MINUS);
}

/** A number with a fixed count of decimals: `formatFixed(1.3996, 2)` is "1.40". */
export function formatFixed(value: number, decimals: number): string {
  if (!Number.isFinite(value)) return NOT_KNOWN;
  return spell(value, { minimumFractionDigits: decimals, maximumFractionDigits: decimals });
}

/** A whole number, rounded: "26 297". */
export function formatCount(value: number): string {
  return formatFixed(value, 0);
}

/**
 * An estimate to so many significant digits, whole digits always kept: 1.3996 is "1.40", 0.07914 is
 * "0.0791", 26 296.8 is "26 297". Beyond what can be read at a glance (under 1e-6, from 1e15) it turns
 * to powers of ten.
 */
export function formatNumber(value: number, significant = 3): string {
  if (!Number.isFinite(value)) return NOT_KNOWN;
  if (value === 0) return '0';
  const rounded = Number(value.toPrecision(significant));
  const exponent = Math.floor(Math.log10(Math.abs(rounded)));
  if (exponent < -6 || exponent >= 15) {
    const [mantissa = '', power = ''] = value.toExponential(significant - 1).split('e');
    return `${mantissa.replace('-', MINUS)}${THIN}×${THIN}10${superscript(Number(power))}`;
  }
  return formatFixed(value, Math.max(0, significant - 1 - exponent));
}

function superscript(power: number): string {
  const digits = '⁰¹²³⁴⁵⁶⁷⁸⁹';
  const raised = [...String(Math.abs(power))].map((digit) => digits.charAt(Number(digit))).join('');
  return power < 0 ? `⁻${raised}` : raised;
}

/**
 * A way to write several numbers with the same decimals, as many as the largest of them needs for so many
 * significant digits: 0.98, 0.784 and 1.23 become "0.98", "0.78" and "1.23".
 */
export function formatAlike(values: readonly (number | null)[], significant = 3): (value: number) => string {
  const largest = values.reduce<number>(
    (most, value) => (value !== null && Number.isFinite(value) ? Math.max(most, Math.abs(value)) : most),
    0,
  );
  if (largest < 1e-6 || largest >= 1e15) return (value) => formatNumber(value, significant);
  const exponent = Math.floor(Math.log10(Number(largest.toPrecision(significant))));
  const decimals = Math.max(0, significant - 1 - exponent);
  return (value) => formatFixed(value, decimals);
}

/** As {@link formatNumber}, without zeros that say nothing: 1.50 is "1.5", 12.0 is "12". */
export function formatTrimmed(value: number, significant = 3): string {
  const text = formatNumber(value, significant);
  return /^[^×]*\.\d+$/.test(text) ? text.replace(/\.?0+$/, '') : text;
}

/**
 * A share 0…1 as a percentage: 0.78 is "78 %". What is not nothing and not all never reads so:
 * 0.003 is "under 1 %", 0.998 is "over 99 %".
 */
export function formatPercent(share: number, decimals = 0): string {
  if (!Number.isFinite(share)) return NOT_KNOWN;
  const step = 10 ** -decimals;
  const percent = share * 100;
  if (percent > 0 && percent < step / 2) return `under ${formatFixed(step, decimals)}${THIN}%`;
  if (percent < 100 && percent > 100 - step / 2) return `over ${formatFixed(100 - step, decimals)}${THIN}%`;
  return `${formatFixed(percent, decimals)}${THIN}%`;
}

/** A p-value: "p = 0.40", "p = 0.012", "p < 0.001". */
export function formatP(p: number): string {
  if (!Number.isFinite(p)) return `p ${NOT_KNOWN}`;
  if (p < 0.001) return 'p < 0.001';
  return `p = ${formatFixed(p, p < 0.1 ? 3 : 2)}`;
}

/** Two ends of an interval: "1.09 to 1.76", "at least 1.09", "at most 1.76". */
export function formatInterval(
  low: number | null,
  high: number | null,
  format: (value: number) => string = formatNumber,
): string {
  const hasLow = low !== null && Number.isFinite(low);
  const hasHigh = high !== null && Number.isFinite(high);
  if (hasLow && hasHigh) return `${format(low)} to ${format(high)}`;
  if (hasLow) return `at least ${format(low)}`;
  if (hasHigh) return `at most ${format(high)}`;
  return NOT_KNOWN;
}

/** A count with its noun: "1 failure", "28 failures", "2 batteries". */
export function formatNoun(count: number, singular: string, plural = `${singular}s`): string {
  return `${formatCount(count)} ${count === 1 ? singular : plural}`;
}

/** An amount with its unit in words: "13 months", "1 month", "1.5 months". */
export function formatQuantity(value: number, singular: string, plural = `${singular}s`): string {
  if (!Number.isFinite(value)) return NOT_KNOWN;
  const text = formatTrimmed(value);
  return `${text} ${text === '1' ? singular : plural}`;
}

/** Running time in the class's clock unit: "188 days", "26 297 h". */
export function formatClock(value: number, unit: 'days' | 'hours'): string {
  if (!Number.isFinite(value)) return NOT_KNOWN;
  return unit === 'hours' ? `${formatTrimmed(value)}${THIN}h` : formatQuantity(value, 'day');
}

const DAYS_A_YEAR = 365.25;
const DAYS_A_MONTH = DAYS_A_YEAR / 12;

/** A span of days in the unit people would say it in: "45 days", "13 months", "4.2 years". */
export function formatSpanDays(days: number): string {
  if (!Number.isFinite(days)) return NOT_KNOWN;
  if (Math.abs(days) < 91) return formatQuantity(days, 'day');
  const months = days / DAYS_A_MONTH;
  if (Math.abs(months) < 35.5) return formatQuantity(Number(months.toPrecision(2)), 'month');
  return formatQuantity(Number((days / DAYS_A_YEAR).toPrecision(2)), 'year');
}
