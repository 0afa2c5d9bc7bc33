import type { Database } from '../../db/connection';
import {
  combinationOf,
  historyRowSchema,
  readHistoryRow,
  sourceKeyOf,
  type HistoryContext,
} from './import-history-row';
import { findNamedAssets, judgeHistory, type HistoryTarget } from './import-history-judge.server';
import { writeHistory } from './import-history-write.server';
import type { SeenKeys } from './import-seen.server';
import { judgeRegister, type NewClasses, type RegisterTarget } from './import-register-judge.server';
import { readRegisterRow, registerRowSchema } from './import-register-row';
import { writeRegister } from './import-register-write.server';
import type { FileRow, JudgedRow } from './import-row';
import type { CellRemark, ImportKind } from './import-types';

/** A row that was found good when it was staged, as it was kept. */
export interface KeptRow {
  readonly line: number;
  readonly parsed: unknown;
}

/** A judged row of a file, with what its rejected rows need so as to come back as what they are. */
export type StagedRow = Omit<JudgedRow<unknown, unknown>, 'target'> & { readonly occurrence?: number };

export interface WriteContext {
  readonly importId: string;
  readonly personId: string;
  readonly now: Date;
}

/** What a format does with a batch of rows, at its three moments. */
export interface ImportFormat<Target> {
  /** Judges rows as they come out of a file. Call it with the batches of one file in their order. */
  readonly stage: (trx: Database, rows: readonly FileRow[], seen: SeenKeys) => Promise<StagedRow[]>;
  /** Judges kept rows anew against what is held now, and locks what they rest on. */
  readonly judge: (trx: Database, rows: readonly KeptRow[]) => Promise<JudgedRow<unknown, Target>[]>;
  readonly write: (trx: Database, targets: readonly Target[], context: WriteContext) => Promise<void>;
}

/** Runs one of the formats through something that does not care which. */
export function withFormat<Result>(
  kind: ImportKind,
  context: HistoryContext,
  run: <Target>(format: ImportFormat<Target>) => Result,
): Result {
  return kind === 'register' ? run(registerFormat(context)) : run(historyFormat(context));
}

function registerFormat({ today }: HistoryContext): ImportFormat<RegisterTarget> {
  const newClasses: NewClasses = new Map();
  return {
    async stage(trx, rows, seen) {
      const read = rows.map(({ line, cells, remarks }) => {
        const { row, remarks: wrong } = readRegisterRow(cells, today);
        return { line, row, remarks: [...remarks, ...wrong] };
      });
      const tags = read.flatMap(({ line, row }) => (row.tag === null ? [] : [{ line, key: row.tag }]));
      const earlier = await seen.claim(trx, tags);
      const unique = read.map((each) => {
        const line = earlier.get(each.line);
        const remark = line === undefined ? [] : [repeated('tag', each.row.tag, line)];
        return { ...each, remarks: [...each.remarks, ...remark] };
      });
      return judgeRegister(trx, unique, { newClasses, lock: false });
    },
    judge: (trx, rows) =>
      judgeRegister(
        trx,
        rows.map(({ line, parsed }) => ({ line, row: registerRowSchema.parse(parsed), remarks: [] })),
        { newClasses, lock: true },
      ),
    write: writeRegister,
  };
}

function historyFormat(context: HistoryContext): ImportFormat<HistoryTarget> {
  return {
    async stage(trx, rows, seen) {
      const read = rows.map(({ line, cells, remarks }) => {
        const { row, remarks: wrong } = readHistoryRow(cells, context);
        return { line, cells, row, remarks: [...remarks, ...wrong] };
      });
      const assets = await findNamedAssets(
        trx,
        read.map(({ line, row: { tag } }) => ({ line, tag })),
        false,
      );
      const combined = read.map((each) => {
        const subject = assets.get(each.line)?.id ?? each.cells['tag'] ?? '';
        return { ...each, combination: combinationOf(subject, each.cells) };
      });
      const counted = combined.filter(({ row }) => row.record === null && row.occurrence === null);
      const occurrences = await seen.count(
        trx,
        counted.map(({ line, combination }) => ({ line, key: combination })),
      );
      const keyed = combined.map(({ line, row, remarks, combination }) => {
        const occurrence = row.occurrence ?? occurrences.get(line) ?? 1;
        return {
          line,
          remarks,
          row: { ...row, sourceKey: sourceKeyOf(row.record, combination, occurrence) },
        };
      });
      const earlier = await seen.claim(
        trx,
        keyed.map(({ line, row }) => ({ line, key: row.sourceKey })),
      );
      const unique = keyed.map((each) => {
        const line = earlier.get(each.line);
        if (line === undefined) return each;
        const { record } = each.row;
        const remark = record === null ? repeated('occurrence', '', line) : repeated('record', record, line);
        return { ...each, remarks: [...each.remarks, remark] };
      });
      const judged = await judgeHistory(trx, unique, assets, context);
      return judged.map((each) => ({ ...each, occurrence: occurrences.get(each.line) }));
    },
    async judge(trx, rows) {
      const read = rows.map(({ line, parsed }) => ({
        line,
        row: { ...historyRowSchema.parse(parsed), occurrence: null },
        remarks: [],
      }));
      const assets = await findNamedAssets(
        trx,
        read.map(({ line, row: { tag } }) => ({ line, tag })),
        true,
      );
      return judgeHistory(trx, read, assets, context);
    },
    write: writeHistory,
  };
}

function repeated(column: string, value: string | null, line: number): CellRemark {
  return { column, value: value ?? '', reason: `This stands on line ${line} of the file already.` };
}
