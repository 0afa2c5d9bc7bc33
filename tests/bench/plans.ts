import type { Database } from '../../db/connection';

export interface QueryPlan {
  query: string;
  plan: string;
  milliseconds: number;
  /** Large tables it reads from end to end. */
  readWhole: string[];
}

/** The tables that grow with the records; one page's few rows must never cost reading one of them whole. */
const large = [
  'failures',
  'planned_work',
  'assets',
  'assessments',
  'meter_readings',
  'audit_entries',
  'class_news',
];

/** From the next connection on, the database logs the plan of all it does. */
export async function explainEverything(db: Database): Promise<void> {
  const { rows } = await db.raw<{ rows: { name: string }[] }>('select current_database() as name');
  const settings = {
    session_preload_libraries: 'auto_explain',
    'auto_explain.log_min_duration': '0',
    'auto_explain.log_analyze': 'on',
  };
  await db.raw(`load 'auto_explain'`);
  for (const [name, value] of Object.entries(settings)) {
    await db.raw(`alter database ?? set ${name} = ${value}`, [rows[0]!.name]);
  }
}

/** The plans that a server's log tells, each query once with the longest it took, the slowest first. */
export function plansIn(log: string): QueryPlan[] {
  const plans = new Map<string, QueryPlan>();
  for (const [, duration, text] of log.matchAll(/duration: ([\d.]+) ms {2}plan:\n((?:\t.*\n)+)/g)) {
    const lines = text!.split('\n').map((line) => line.slice(1));
    const planStart = lines.findIndex((line) => /\(cost=/.test(line));
    const query = lines.slice(0, planStart).join(' ').replace('Query Text: ', '').replace(/\s+/g, ' ').trim();
    const milliseconds = Number(duration);
    if ((plans.get(query)?.milliseconds ?? -1) >= milliseconds) continue;
    const plan = lines.slice(planStart).join('\n').trimEnd();
    const readWhole = large.filter((table) => new RegExp(`Seq Scan on ${table}\\b`).test(plan));
    plans.set(query, { query, plan, milliseconds, readWhole });
  }
  return [...plans.values()].sort((a, b) => b.milliseconds - a.milliseconds);
}
