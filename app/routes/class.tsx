import type { ReactNode } from 'react';
import { href, Link } from 'react-router';
import { z } from 'zod';
import { cautionNames } from '~/advice/caution-names';
import { classFigures } from '~/advice/class-figures';
import { changingActions } from '~/advice/proposal';
import { mostMarksListed } from '~/charts/age-rank-layout';
import { VerdictHistoryStrip } from '~/charts/verdict-history-strip';
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
import type { TriedFields } from '~/components/class-page/tried-numbers';
import { TryANumber } from '~/components/class-page/try-a-number';
import { SheetHead, SheetSources } from '~/components/class-page/evidence-sheet';
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
import { readVerdictHistory } from '~/models/verdict-history.server';
import { now } from '~/services/clock.server';
import { organisation, requireViewer } from '~/services/viewer.server';
import { database } from '../../db/connection';
import type { Route } from './+types/class';

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData?.head.name ?? 'Class'} · Intervale` },
];

export async function loader({ context, request, params }: Route.LoaderArgs) {
  const viewer = requireViewer(context, request);
  if (!z.uuid().safeParse(params.classId).success) throw notFound();
  const db = database();
  // All at once: what the viewer may not see is thrown away with the answer below.
  const [head, assessment, problem, alarms, history] = await Promise.all([
    readClassHead(db, viewer.siteIds, params.classId),
    currentAssessment(db, params.classId),
    currentProblem(db, params.classId),
    listAlarms(db, viewer.siteIds, { classId: params.classId }),
    readVerdictHistory(db, params.classId),
  ]);
  if (head === null) throw notFound();
  const { name: organisationName, currency, timeZone } = organisation(context);
  return {
    organisationName,
    printedAt: now(),
    head,
    problem,
    alarms,
    history,
    currency,
    timeZone,
    asked: askedOf(request),
    isLead: viewer.roles.includes('lead'),
    isDecider: viewer.roles.some((role) => role !== 'technician'),
    mayEdit: viewer.roles.some((role) => role === 'lead' || role === 'admin'),
    assessment: assessment && view(assessment),
  };
}

const notFound = () => new Response('There is no such class.', { status: 404 });

/** The numbers that the address asks to try; null where it asks nothing. */
function askedOf(request: Request): TriedFields | null {
  const search = new URL(request.url).searchParams;
  const field = (name: string) => search.get(`try-${name}`)?.slice(0, 14) ?? '';
  if (!search.has('try-planned')) return null;
  return { interval: field('interval'), planned: field('planned'), failure: field('failure') };
}

/** What the page shows of an assessment: words, numbers and the points of its charts. */
function view({ asOf, findings, conclusion }: Assessment) {
  const { marks, ...ageRank } = findings.ageRank;
  return {
    asOf,
    conclusion,
    findings: {
      clock: findings.clock,
      extent: findings.extent,
      leftOut: findings.leftOut,
      rate: findings.rate,
      trend: { ...findings.trend, failureExposures: [] },
      life: { ...findings.life, hazardBands: [] },
      ageRank: { ...findings.ageRank, marks: [] },
      modes: findings.modes,
      schedule: findings.schedule,
      forecast:
        findings.forecast.kind === 'forecast' ? { ...findings.forecast, sites: [] } : findings.forecast,
    },
    figures: classFigures(findings),
    ageRank: {
      ...ageRank,
      // Beyond so many the strip's table counts them instead of naming their days.
      marks: marks.map(({ share, at }) => ({
        share,
        day: marks.length <= mostMarksListed ? formatCalendarDate(dayOf(at), 'short') : '',
      })),
    },
    watchedSince:
      findings.extent.watchedFrom === null ? null : formatCalendarDate(dayOf(findings.extent.watchedFrom)),
  };
}

type View = ReturnType<typeof view>;
type Loaded = Route.ComponentProps['loaderData'];
type Head = Loaded['head'];

export default function ClassPage({ loaderData }: Route.ComponentProps) {
  const { head, problem, assessment, alarms, isLead, timeZone } = loaderData;
  return (
    <article className="class-page">
      {assessment !== null && (
        <SheetHead
          organisationName={loaderData.organisationName}
          asOf={assessment.asOf}
          printedAt={loaderData.printedAt}
          timeZone={timeZone}
        />
      )}
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
        <Assessed loaderData={loaderData} assessment={assessment}>
          <AlarmNotices alarms={alarms} itemPlural={head.itemPlural} mayClear={isLead} timeZone={timeZone} />
        </Assessed>
      )}
      <ClassLinks loaderData={loaderData} />
      <SheetSources />
    </article>
  );
}

/** Where to go on from here, by what the viewer may do. */
function ClassLinks({ loaderData }: { loaderData: Loaded }) {
  const { head, isLead, isDecider, mayEdit } = loaderData;
  const { id: classId } = head;
  const links = [
    { to: href('/classes/:classId/records', { classId }), label: 'Failures and planned work', isShown: true },
    { to: href('/classes/:classId/positions', { classId }), label: 'Place by place', isShown: true },
    { to: href('/classes/:classId/tasks', { classId }), label: 'Planned maintenance', isShown: true },
    { to: href('/classes/:classId/clean', { classId }), label: 'Put records right', isShown: isLead },
    { to: `${href('/changes')}?class=${classId}`, label: 'Changes of this class', isShown: isDecider },
    { to: href('/classes/:classId/settings', { classId }), label: 'Class settings', isShown: mayEdit },
  ];
  return (
    <nav aria-label="More about this class" className="no-print mt-6 flex flex-wrap gap-3">
      {links
        .filter(({ isShown }) => isShown)
        .map(({ to, label }) => (
          <LinkButton key={label} tone="quiet" to={to}>
            {label}
          </LinkButton>
        ))}
    </nav>
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
  loaderData: Loaded;
  assessment: View;
  /** What stands between the sentence and the questions. */
  children: ReactNode;
}

function Assessed({ loaderData, assessment, children }: AssessedProps) {
  const { head, currency, mayEdit, isLead, asked, history } = loaderData;
  const { conclusion, findings, figures, ageRank, asOf, watchedSince } = assessment;
  const { itemSingular, itemPlural } = head;
  const mayPutForward = isLead && !head.statutory && !head.endangersPeople;
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
      >
        <TryANumber
          classId={head.id}
          schedule={findings.schedule}
          clock={findings.clock}
          currency={currency}
          itemPlural={itemPlural}
          asked={asked}
          mayPutForward={mayPutForward}
        />
      </QuestionSchedule>
      <WhatToDo conclusion={conclusion}>
        {mayPutForward && (
          <p className="no-print mt-5">
            <LinkButton
              tone={changingActions.includes(conclusion.proposal.action) ? 'main' : 'quiet'}
              to={href('/classes/:classId/change', { classId: head.id })}
            >
              {changingActions.includes(conclusion.proposal.action)
                ? 'Put this change forward'
                : 'Put a change forward by hand'}
            </LinkButton>
          </p>
        )}
      </WhatToDo>
      <FailureModes modes={findings.modes} verdicts={conclusion.modes} clock={findings.clock} />
      <ExpectedFailures forecast={findings.forecast} itemPlural={itemPlural} />
      <RestsOn findings={findings} itemSingular={itemSingular} watchedSince={watchedSince}>
        <VerdictHistoryStrip runs={history} />
        <p className="mt-4">
          <Link to={href('/classes/:classId/records', { classId: head.id })}>
            The failures and planned work behind this
          </Link>
        </p>
      </RestsOn>
    </>
  );
}
