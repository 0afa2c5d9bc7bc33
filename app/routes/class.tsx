import type { ReactNode } from 'react';
import { href, Link } from 'react-router';
import { cautionNames } from '~/advice/caution-names';
import { classFigures } from '~/advice/class-figures';
import type { Caution } from '~/advice/conclusion';
import { Breadcrumbs } from '~/components/breadcrumbs';
import { LinkButton } from '~/components/button';
import { AlarmNotices } from '~/components/class-page/alarm-notices';
import { ExpectedFailures } from '~/components/class-page/expected-failures';
import { FailureModes } from '~/components/class-page/failure-modes';
import { QuestionAge } from '~/components/class-page/question-age';
import { exposureUnitName, QuestionTrend } from '~/components/class-page/question-trend';
import { QuestionSchedule } from '~/components/class-page/question-schedule';
import { RestsOn } from '~/components/class-page/rests-on';
import { WhatToDo } from '~/components/class-page/what-to-do';
import { EmptyState } from '~/components/empty-state';
import { FactStrip } from '~/components/fact-strip';
import { formatCount, formatNoun, formatTrimmed } from '~/format/number';
import { formatCalendarDate } from '~/format/date';
import { Notice } from '~/components/notice';
import { VERDICT_COLOUR } from '~/components/verdict';
import { VerdictGlyph } from '~/components/verdict-glyph';
import { listAlarms } from '~/models/alarms.server';
import { currentAssessment, type Assessment } from '~/models/assessments.server';
import { readClassHead } from '~/models/class-list.server';
import { dayOf } from '~/models/day-number';
import { currentProblem } from '~/models/job-runs.server';
import { organisation, requireViewer } from '~/services/viewer.server';
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
  const [assessment, problem, alarms] = await Promise.all([
    currentAssessment(db, params.classId),
    currentProblem(db, params.classId),
    listAlarms(db, viewer.siteIds, { classId: params.classId }),
  ]);
  const { currency, timeZone } = organisation(context);
  return {
    head,
    problem,
    alarms,
    currency,
    timeZone,
    mayClear: viewer.roles.includes('lead'),
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
  const { head, problem, assessment, alarms, mayEdit, mayClear, currency, timeZone } = loaderData;
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
        <Assessed head={head} assessment={assessment} currency={currency} mayEdit={mayEdit}>
          <AlarmNotices
            alarms={alarms}
            itemPlural={head.itemPlural}
            mayClear={mayClear}
            timeZone={timeZone}
          />
        </Assessed>
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
      <a href="#what-to-do" className="inline-flex min-h-11 items-center gap-1">
        {formatNoun(cautions.length, 'caution')}: {cautions.map(({ code }) => cautionNames[code]).join(', ')}
      </a>
    </p>
  );
}

interface AssessedProps {
  head: Head;
  assessment: View;
  currency: string;
  mayEdit: boolean;
  /** What stands between the sentence and the questions. */
  children: ReactNode;
}

function Assessed({ head, assessment, currency, mayEdit, children }: AssessedProps) {
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
      {children}
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
      <QuestionSchedule
        answer={conclusion.answers.schedule}
        clock={findings.clock}
        schedule={findings.schedule}
        currency={currency}
        costsLink={
          mayEdit && <Link to={href('/classes/:classId/settings', { classId: head.id })}>Give the costs</Link>
        }
      />
      <WhatToDo conclusion={conclusion} />
      <FailureModes modes={findings.modes} verdicts={conclusion.modes} clock={findings.clock} />
      <ExpectedFailures forecast={findings.forecast} itemPlural={itemPlural} />
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
