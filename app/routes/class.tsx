import { href, Link } from 'react-router';
import { cautionNames } from '~/advice/caution-names';
import { classFigures } from '~/advice/class-figures';
import type { Caution } from '~/advice/conclusion';
import { Breadcrumbs } from '~/components/breadcrumbs';
import { LinkButton } from '~/components/button';
import { CautionList } from '~/components/caution-list';
import { QuestionAge } from '~/components/class-page/question-age';
import { exposureUnitName, QuestionTrend } from '~/components/class-page/question-trend';
import { RestsOn } from '~/components/class-page/rests-on';
import { EmptyState } from '~/components/empty-state';
import { FactStrip } from '~/components/fact-strip';
import { formatCount, formatNoun, formatTrimmed } from '~/format/number';
import { formatCalendarDate } from '~/format/date';
import { Notice } from '~/components/notice';
import { QuestionSection } from '~/components/question-section';
import { VERDICT_COLOUR } from '~/components/verdict';
import { VerdictGlyph } from '~/components/verdict-glyph';
import { currentAssessment, type Assessment } from '~/models/assessments.server';
import { readClassHead } from '~/models/class-list.server';
import { dayOf } from '~/models/day-number';
import { currentProblem } from '~/models/job-runs.server';
import { requireViewer } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/class';

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData?.head.name ?? 'Class'} · Intervale` },
];

export async function loader({ context, request, params }: Route.LoaderArgs) {
  const viewer = requireViewer(context, request);
  const db = database();
  const head = await readClassHead(db, viewer.siteIds, params.classId);
  if (head === null) throw new Response('There is no such class.', { status: 404 });
  const [assessment, problem] = await Promise.all([
    currentAssessment(db, params.classId),
    currentProblem(db, params.classId),
  ]);
  return {
    head,
    problem,
    mayEdit: viewer.roles.some((role) => role === 'lead' || role === 'admin'),
    assessment: assessment && view(assessment),
  };
}

/** What the page shows of an assessment: words, numbers and the points of its charts. */
function view({ asOf, findings, conclusion }: Assessment) {
  const { marks, ...ageRank } = findings.ageRank;
  return {
    asOf,
    conclusion,
    findings: { ...findings, trend: { ...findings.trend, failureExposures: [] } },
    figures: classFigures(findings),
    ageRank: {
      ...ageRank,
      marks: marks.map(({ share, at }) => ({ share, day: formatCalendarDate(dayOf(at), 'short') })),
    },
    watchedSince:
      findings.extent.watchedFrom === null ? null : formatCalendarDate(dayOf(findings.extent.watchedFrom)),
  };
}

type View = ReturnType<typeof view>;
type Head = Route.ComponentProps['loaderData']['head'];

export default function ClassPage({ loaderData }: Route.ComponentProps) {
  const { head, problem, assessment, mayEdit } = loaderData;
  return (
    <article>
      <Breadcrumbs crumbs={[{ label: 'Classes', to: href('/classes') }, { label: placesOf(head) }]} />
      {problem !== null && (
        <Notice tone="warning" title="Last night could not compute this class.">
          {problem} {assessment && `What follows is from ${formatCalendarDate(assessment.asOf)}.`}
        </Notice>
      )}
      {assessment === null ? (
        <>
          <h1>{head.name}</h1>
          <EmptyState title="Not assessed yet">
            The first assessment comes with the next night. It needs assets with a date of going into service.
          </EmptyState>
        </>
      ) : (
        <Assessed head={head} assessment={assessment} />
      )}
      <p className="no-print mt-6 flex flex-wrap gap-3">
        <LinkButton tone="quiet" to={href('/classes/:classId/records', { classId: head.id })}>
          Failures and planned work
        </LinkButton>
        {mayEdit && (
          <LinkButton tone="quiet" to={href('/classes/:classId/settings', { classId: head.id })}>
            Class settings
          </LinkButton>
        )}
      </p>
    </article>
  );
}

/** Up to two sites by name, more by number. */
function placesOf({ sites }: Head): string {
  if (sites.length === 0) return 'no site yet';
  return sites.length <= 2
    ? sites.map(({ name }) => name).join(' and ')
    : `${formatCount(sites.length)} sites`;
}

/** The cautions by name, so that they are among the first things seen; the whole text stands with the advice. */
function CautionsAtAGlance({ cautions }: { cautions: readonly Caution[] }) {
  if (cautions.length === 0) return null;
  return (
    <p className="mb-3">
      <a href="#what-it-means" className="inline-flex min-h-11 items-center gap-1">
        {formatNoun(cautions.length, 'caution')}: {cautions.map(({ code }) => cautionNames[code]).join(', ')}
      </a>
    </p>
  );
}

function Assessed({ head, assessment }: { head: Head; assessment: View }) {
  const { conclusion, findings, figures, ageRank, asOf, watchedSince } = assessment;
  const { itemSingular, itemPlural } = head;
  return (
    <>
      <h1 className="flex items-baseline gap-3">
        <VerdictGlyph verdict={conclusion.verdict} className="w-[1.5em] flex-none" />
        {head.name}
      </h1>
      <p className="my-4 max-w-[46ch] text-[1.35rem] leading-snug">
        <strong style={{ color: VERDICT_COLOUR[conclusion.verdict] }}>{conclusion.headline.claim}</strong>{' '}
        {conclusion.headline.support}
      </p>
      <CautionsAtAGlance cautions={conclusion.cautions} />
      <FactStrip
        facts={[
          { value: conclusion.verdict, label: 'verdict' },
          { value: conclusion.trend, label: 'trend' },
          { value: formatCount(findings.rate.overall.failures), label: 'failures' },
          { value: formatCount(findings.extent.positions), label: itemPlural },
          {
            value: formatTrimmed(figures.cumulative.totalExposure),
            label: `${exposureUnitName(findings.clock, itemSingular)} watched`,
          },
          { label: `as of the end of ${formatCalendarDate(asOf)}` },
        ]}
      />
      <QuestionTrend
        conclusion={conclusion}
        findings={findings}
        figures={figures.cumulative}
        itemSingular={itemSingular}
      />
      <QuestionAge
        conclusion={conclusion}
        findings={findings}
        ageRank={ageRank}
        figures={figures.hazard}
        itemSingular={itemSingular}
      />
      <QuestionSection
        id="what-it-means"
        title="What it means"
        words={<p className="text-grey text-[0.92rem]">Cautions first. They are part of the advice.</p>}
      >
        <CautionList cautions={conclusion.cautions} />
        <p className="mt-5 text-[1.2rem] leading-snug">{conclusion.together}</p>
      </QuestionSection>
      <RestsOn findings={findings} itemSingular={itemSingular} watchedSince={watchedSince}>
        <p>
          <Link to={href('/classes/:classId/records', { classId: head.id })}>
            The failures and planned work behind this
          </Link>
        </p>
      </RestsOn>
    </>
  );
}
