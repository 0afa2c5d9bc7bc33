import type calibrationJson from '~/advice/calibration.json';
import { ScrollBox } from '~/components/scroll-box';
import { formatCount, formatPercent } from '~/format/number';

type Calibration = typeof calibrationJson;

const intervalNames: Record<string, string> = {
  shape: 'Shape β',
  slope: 'Slope of the rate',
  'mean-time': 'Mean time between failures',
  'mean-life': 'Mean life',
  'tenth-gone': 'B10 life',
  'hazard-band': 'Hazard by age band',
  forecast: 'Failures to come',
  saving: 'Saving a year (80 %)',
};
const counts = [5, 10, 20, 40, 80];

/** How often intervals, tests, verdicts and alarms are right, by simulation from fixed seeds. */
export function CalibrationFigures({ calibration }: { calibration: Calibration }) {
  const { testSizes, verdicts, alarms, regret } = calibration;
  const percent = (share: number) => formatPercent(share, 1);
  return (
    <section aria-labelledby="calibration" className="mt-10">
      <h2 id="calibration">How often they are right</h2>
      <p className="mt-1 max-w-[62ch]">
        Simulated classes with a known truth, watched for three years. Intervals are to hold it in 90 %, a
        saving in 80 %; from few failures they hold it less often, and the class page says so.
      </p>
      <Coverage coverage={calibration.coverage} />
      <ul className="mt-4 max-w-[62ch] list-disc pl-5">
        <li>
          Without a trend the Laplace test rejects in {percent(testSizes.laplace.share)}, the age-rank test
          without memory in {percent(testSizes.ageRank.share)}: both are to do so in 5 %.
        </li>
        <li>
          A truly memoryless class with about 38 failures is called memoryless in{' '}
          {percent(verdicts.memoryless.memoryless.share)}, wear-out in{' '}
          {percent(verdicts.memoryless['wear-out'].share)}; one of shape 2 is called wear-out in{' '}
          {percent(verdicts.wearOut['wear-out'].share)}.
        </li>
        <li>
          Of classes called wear-out, half of all truly wearing out, {percent(verdicts.falseDiscovery.mean)}{' '}
          are not; at most 10 % may be.
        </li>
        <li>
          Of 500 memoryless classes looked at every night of a year,{' '}
          {percent(alarms.memorylessYear.raised.share)} raised an alarm; at most 5 % may.
        </li>
        <li>
          Wear-out of shape 2 at 30 positions raises the age alarm after{' '}
          {formatCount(alarms.untilWearOut.nights.median)} nights and{' '}
          {formatCount(alarms.untilWearOut.failures.median)} failures in the median.
        </li>
      </ul>
      <Regret regret={regret} />
    </section>
  );
}

const tableClass =
  'mt-3 w-full max-w-[46rem] text-left text-[0.92rem] [&_td]:py-1 [&_td]:pr-3 [&_th]:py-1 [&_th]:pr-3';

function Coverage({ coverage }: Pick<Calibration, 'coverage'>) {
  const rows = [...new Set(coverage.map(({ interval, shape }) => `${interval} ${shape}`))].map((key) => {
    const [interval = '', shape = ''] = key.split(' ');
    return { interval, shape: Number(shape) };
  });
  return (
    <ScrollBox label="How often intervals hold the truth">
      <table className={tableClass}>
        <caption className="pt-3 text-left font-bold">
          Share of classes whose interval holds the truth
        </caption>
        <thead>
          <tr className="border-hair border-b">
            <th scope="col">Interval</th>
            <th scope="col">True shape</th>
            {counts.map((count) => (
              <th key={count} scope="col">
                {formatCount(count)} failures
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map(({ interval, shape }) => (
            <tr key={`${interval} ${shape}`} className="border-hair border-b">
              <th scope="row">{intervalNames[interval] ?? interval}</th>
              <td className="tabular">{shape}</td>
              {counts.map((count) => {
                const held = coverage.find(
                  (one) => one.interval === interval && one.shape === shape && one.failures === count,
                );
                return (
                  <td key={count} className="tabular">
                    {held === undefined ? '' : formatPercent(held.share)}
                  </td>
                );
              })}
            </tr>
          ))}
        </tbody>
      </table>
    </ScrollBox>
  );
}

function Regret({ regret }: Pick<Calibration, 'regret'>) {
  return (
    <table className={tableClass}>
      <caption className="pt-3 text-left font-bold">
        What following the advice costs beyond the true best, a failure costing ten renewals
      </caption>
      <thead>
        <tr className="border-hair border-b">
          <th scope="col">True shape</th>
          <th scope="col">Failures</th>
          <th scope="col">Median</th>
          <th scope="col">Nine in ten within</th>
        </tr>
      </thead>
      <tbody>
        {regret.map(({ shape, failures, median, nineInTen }) => (
          <tr key={`${shape} ${failures}`} className="border-hair border-b">
            <td className="tabular">{shape}</td>
            <td className="tabular">{failures}</td>
            <td className="tabular">{formatPercent(median, 1)}</td>
            <td className="tabular">{formatPercent(nineInTen, 1)}</td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}
