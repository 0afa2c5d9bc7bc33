import { href, Link } from 'react-router';
import calibration from '~/advice/calibration.json';
import { ageMethods } from '~/components/methods/age-methods';
import { CalibrationFigures } from '~/components/methods/calibration-figures';
import type { MethodGroup } from '~/components/methods/method';
import { MethodEntry, type MethodShown } from '~/components/methods/method-entry';
import { scheduleMethods } from '~/components/methods/schedule-methods';
import { trendMethods } from '~/components/methods/trend-methods';
import { formulaInMathMl } from '~/services/formula.server';
import { requireViewer } from '~/services/viewer.server';
import type { Route } from './+types/methods';

const groups: readonly MethodGroup[] = [trendMethods, ageMethods, scheduleMethods];

export const meta: Route.MetaFunction = () => [{ title: 'Methods · Intervale' }];

export function loader({ context, request }: Route.LoaderArgs) {
  requireViewer(context, request);
  return {
    calibration,
    groups: groups.map(({ methods, ...group }) => ({
      ...group,
      methods: methods.map((method): MethodShown => ({
        ...method,
        formulas: method.formulas.map((tex) => formulaInMathMl(tex, 'block')),
        symbols: method.symbols.map(([tex, meaning]) => ({
          symbol: formulaInMathMl(tex, 'inline'),
          meaning,
        })),
      })),
    })),
  };
}

export default function Methods({ loaderData }: Route.ComponentProps) {
  return (
    <article>
      <h1>Methods</h1>
      <p className="text-grey max-w-[62ch]">
        Every number on a <Link to={href('/classes')}>class</Link> page comes from one of these. Each says
        what it decides, what it takes for granted, where it comes from, and which published values it gives
        again.
      </p>
      <nav aria-label="Methods" className="no-print my-6 grid gap-x-8 gap-y-4 sm:grid-cols-2 lg:grid-cols-4">
        {loaderData.groups.map(({ id, title, methods }) => (
          <div key={id}>
            <p className="font-bold">
              <a href={`#${id}`}>{title}</a>
            </p>
            <ul>
              {methods.map((method) => (
                <li key={method.id}>
                  <a href={`#${method.id}`} className="inline-flex items-center max-md:min-h-11">
                    {method.name}
                  </a>
                </li>
              ))}
            </ul>
          </div>
        ))}
        <p className="font-bold">
          <a href="#calibration">How often they are right</a>
        </p>
      </nav>
      {loaderData.groups.map(({ id, title, methods }) => (
        <section key={id} aria-labelledby={id} className="mt-10">
          <h2 id={id}>{title}</h2>
          {methods.map((method) => (
            <MethodEntry key={method.id} method={method} />
          ))}
        </section>
      ))}
      <CalibrationFigures calibration={loaderData.calibration} />
    </article>
  );
}
