import { formatMoney } from '~/format/money';

/** An estimate of money to so many digits, so that no more is said than is known: £7 691.20 is "£7 700". */
export function formatRoughMoney(amountMinor: number, currency: string, digits = 2): string {
  return formatMoney(Number(amountMinor.toPrecision(digits)), currency, 'never');
}
