const format = new Intl.NumberFormat('en-GB', { maximumFractionDigits: 2 });

/** What a meter shows, to the last digit it was read with: "10,452.5 h". */
export function hoursWords(hours: number): string {
  return `${format.format(hours)} h`;
}
