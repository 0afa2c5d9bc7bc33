import { formatAlike, formatCount, formatInterval } from '~/format/number';

interface EstimateProps {
  value: number | null;
  /** Ends of its interval; null for an end that does not exist. */
  low: number | null;
  high: number | null;
  /** What it rests on. */
  n?: number;
  format?: (value: number) => string;
  /** How the interval's ends are written, where repeating the unit would only be noise. */
  formatEnd?: (value: number) => string;
  /** Why there is no value, in a few words. */
  missing?: string;
}

/** An estimate never without its interval and what it rests on: "1.40 (1.09 to 1.76), n = 48". */
export function Estimate(props: EstimateProps) {
  const { value, low, high, n, missing = 'cannot be estimated' } = props;
  const format = props.format ?? formatAlike([value, low, high]);
  const isKnown = value !== null && Number.isFinite(value);
  // Without a value before them the ends must carry the unit themselves.
  const interval = formatInterval(low, high, isKnown ? (props.formatEnd ?? format) : format);
  const comma = n === undefined ? '' : ',';
  return (
    <span className="tabular">
      {isKnown && `${format(value)} `}
      <span className={isKnown ? 'whitespace-nowrap' : undefined}>
        {isKnown ? `(${interval})` : low === null && high === null ? missing : interval}
        {comma}
      </span>
      {n !== undefined && (
        <>
          {' '}
          <span className="text-grey whitespace-nowrap">n = {formatCount(n)}</span>
        </>
      )}
    </span>
  );
}
