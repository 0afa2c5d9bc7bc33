import { z } from 'zod';
import { verdicts, type Verdict } from '~/advice/verdict';
import type { Database } from '../../db/connection';

/** Nights on end with one verdict, and what brought it about. */
export interface VerdictRun {
  verdict: Verdict;
  from: string;
  to: string;
  nights: number;
  /** Failures behind the last of them. */
  n: number;
  /** What happened to the records before its first night; null for the first run, and where nobody noted it. */
  why: string | null;
}

const runSchema = z.object({
  verdict: z.enum(verdicts),
  from: z.string(),
  to: z.string(),
  nights: z.number(),
  n: z.number(),
  why: z.string().nullable(),
});

/** What a class was called, night after night, as stored each night: the oldest first. */
export async function readVerdictHistory(db: Database, classId: string): Promise<VerdictRun[]> {
  const { rows } = await db.raw<{ rows: unknown[] }>(
    `with nights as (
       select as_of, verdict, failures,
              row_number() over (order by as_of) - row_number() over (partition by verdict order by as_of) as run
         from assessments a
        where class_id = :classId and exists (
          select from job_runs r where r.id = a.run_id and r.state = 'finished')),
     runs as (
       select verdict, min(as_of) as first, max(as_of) as last, count(*) as nights,
              (array_agg(failures order by as_of desc))[1] as n
         from nights group by verdict, run)
     select r.verdict, r.first as "from", r.last as "to", r.nights, r.n,
            (select n.why from class_news n
              where n.class_id = :classId and n.as_of = r.first and n.kind in ('verdict-changed', 'became-decidable')
              limit 1) as why
       from runs r order by r.first`,
    { classId },
  );
  return rows.map((row) => runSchema.parse(row));
}
