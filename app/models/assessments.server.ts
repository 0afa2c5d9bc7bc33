import { z } from 'zod';
import { conclusionSchema, type Conclusion } from '~/advice/conclusion';
import { findingsSchema, type Findings } from '~/advice/findings';
import type { Verdict } from '~/advice/verdict';
import type { Database } from '../../db/connection';
import { summarise } from './assessment-summary';

/** One class on one night: the estimates and what was made of them. */
export interface Assessment {
  id: string;
  classId: string;
  asOf: string;
  findings: Findings;
  conclusion: Conclusion;
}

const detailSchema = z.object({ findings: findingsSchema, conclusion: conclusionSchema });

interface AssessmentContent {
  findings: Findings;
  conclusion: Conclusion;
}

/** Stores what a run made of one class. It is in force only once the run finishes. */
export async function insertAssessment(
  db: Database,
  run: { runId: string; asOf: string },
  classId: string,
  content: AssessmentContent,
): Promise<void> {
  const { findings, conclusion } = content;
  await db.raw(
    `insert into assessments (run_id, class_id, as_of, verdict, trend, failures, caution_codes, summary, detail)
     values (:runId, :classId, :asOf, :verdict, :trend, :failures, :cautionCodes, :summary, :detail)`,
    { ...run, classId, failures: findings.rate.overall.failures, ...columnsOf(findings, conclusion) },
  );
}

/** Judges a stored assessment of an unfinished run anew, its findings unchanged. */
export async function rejudgeAssessment(
  db: Database,
  runId: string,
  classId: string,
  judge: (findings: Findings) => Conclusion,
): Promise<void> {
  const { rows } = await db.raw<{ rows: { detail: unknown }[] }>(
    `select detail from assessments where run_id = ? and class_id = ?`,
    [runId, classId],
  );
  const { findings } = detailSchema.parse(rows[0]?.detail);
  await db.raw(
    `update assessments set verdict = :verdict, trend = :trend, caution_codes = :cautionCodes,
            summary = :summary, detail = :detail
      where run_id = :runId and class_id = :classId`,
    { runId, classId, ...columnsOf(findings, judge(findings)) },
  );
}

function columnsOf(findings: Findings, conclusion: Conclusion) {
  return {
    verdict: conclusion.verdict,
    trend: conclusion.trend,
    cautionCodes: conclusion.cautions.map(({ code }) => code),
    summary: JSON.stringify(summarise(findings, conclusion)),
    detail: JSON.stringify({ findings, conclusion }),
  };
}

/**
 * Puts a run's assessments in force, all at once. Those of an earlier run as of the same day give way; a
 * later day's stay in force, so that looking back at a past night changes nothing of today. Call it in a
 * transaction.
 */
export async function finishRun(db: Database, runId: string, asOf: string): Promise<void> {
  await db.raw(
    `update asset_classes c set current_assessment_id = a.id
       from assessments a
      where a.run_id = :runId and c.id = a.class_id
        and not exists (select from assessments held
                         where held.id = c.current_assessment_id and held.as_of > a.as_of)`,
    { runId },
  );
  await writeStandings(db, runId);
  await db.raw(
    `delete from assessments a using assessments fresh
      where fresh.run_id = :runId and a.class_id = fresh.class_id and a.as_of = :asOf and a.run_id <> :runId`,
    { runId, asOf },
  );
  await db.raw(
    `update job_runs set state = 'finished', finished_at = now(),
            classes_computed = (select count(*) from assessments where run_id = :runId)
      where id = :runId`,
    { runId },
  );
}

/** Writes down what lists show of the classes whose assessment of this run is in force. */
async function writeStandings(db: Database, runId: string): Promise<void> {
  const inForce = `from assessments a join asset_classes c on c.current_assessment_id = a.id where a.run_id = :runId`;
  await db.raw(
    `insert into class_standings (class_id, assessment_id, as_of, verdict, trend, failures, failures_last_year,
                                  mean_time, slope, caution_codes, summary)
     select a.class_id, a.id, a.as_of, a.verdict, a.trend, a.failures, (a.summary ->> 'failuresLastYear')::integer,
            (a.summary ->> 'meanTime')::float8, (a.summary ->> 'slope')::float8, a.caution_codes, a.summary - 'toCome'
       ${inForce}
     on conflict (class_id) do update
       set assessment_id = excluded.assessment_id, as_of = excluded.as_of, verdict = excluded.verdict,
           trend = excluded.trend, failures = excluded.failures, failures_last_year = excluded.failures_last_year,
           mean_time = excluded.mean_time, slope = excluded.slope, caution_codes = excluded.caution_codes,
           summary = excluded.summary`,
    { runId },
  );
  await db.raw(`delete from class_outlooks where class_id in (select a.class_id ${inForce})`, { runId });
  await db.raw(
    `insert into class_outlooks (class_id, site_id, months, positions, mean, low, high, spares)
     select a.class_id, y."siteId", p.months, y.positions, (p.period ->> 'mean')::float8,
            (p.period ->> 'low')::integer, (p.period ->> 'high')::integer, y.spares
       from assessments a
       join asset_classes c on c.current_assessment_id = a.id
       cross join lateral jsonb_to_recordset(a.summary -> 'toCome')
         as y("siteId" uuid, positions integer, m1 jsonb, m3 jsonb, m12 jsonb, spares integer)
       cross join lateral (values (1, y.m1), (3, y.m3), (12, y.m12)) as p(months, period)
      where a.run_id = :runId`,
    { runId },
  );
}

/** Drops what runs left behind that never finished. */
export async function dropUnfinishedAssessments(db: Database): Promise<void> {
  await db.raw(
    `delete from assessments a using job_runs r
      where r.id = a.run_id and r.state in ('abandoned', 'failed')`,
  );
}

/** The assessment in force for a class; null before the first night. */
export async function currentAssessment(db: Database, classId: string): Promise<Assessment | null> {
  const { rows } = await db.raw<{ rows: { id: string; asOf: string; detail: unknown }[] }>(
    `select a.id, a.as_of as "asOf", a.detail
       from asset_classes c join assessments a on a.id = c.current_assessment_id
      where c.id = ?`,
    [classId],
  );
  const row = rows[0];
  if (row === undefined) return null;
  return { id: row.id, classId, asOf: row.asOf, ...detailSchema.parse(row.detail) };
}

/** What a class is called today; null before the first night. */
export async function currentVerdict(db: Database, classId: string): Promise<Verdict | null> {
  const { rows } = await db.raw<{ rows: { verdict: Verdict }[] }>(
    `select a.verdict from asset_classes c join assessments a on a.id = c.current_assessment_id where c.id = ?`,
    [classId],
  );
  return rows[0]?.verdict ?? null;
}

/** The day of the assessment in force; null before the first night. */
export async function currentAsOf(db: Database, classId: string): Promise<string | null> {
  const { rows } = await db.raw<{ rows: { asOf: string }[] }>(
    `select a.as_of as "asOf" from asset_classes c join assessments a on a.id = c.current_assessment_id where c.id = ?`,
    [classId],
  );
  return rows[0]?.asOf ?? null;
}
