import { formatCount } from '~/format/number';

/** From so many failures on the intervals hold the truth as often as they say; the calibration shows it. */
const enoughFailures = 20;

/** Says that intervals from few failures are rough; nothing where there are failures enough, or none. */
export function RoughIntervals({ failures }: { failures: number }) {
  if (failures === 0 || failures >= enoughFailures) return null;
  return (
    <p className="text-grey mt-2 text-[0.92rem]">
      With {formatCount(failures)} of the {formatCount(enoughFailures)} failures it takes, the 90&nbsp;%
      intervals are rough: they hold the truth less often than they say.
    </p>
  );
}
