import type { Database } from '../../db/connection';
import { type Asset, findAsset } from './assets.server';
import { writeAudit } from './audit.server';
import { constraintOf } from './constraint';
import { type LastChange, findLastChange } from './last-change.server';
import {
  type Neighbours,
  type ReadingRefusal,
  refuseReading,
  refuseVoid,
  type ShownHours,
} from './reading-refusals';

/** A reading of an hours meter as a person reports it. */
export interface ReadingEntry extends ShownHours {
  /** Made before the entry is sent, so that the same entry sent twice is stored once. */
  readonly id: string;
  readonly assetId: string;
}

/** A reading as it is stored, with the names a reader needs. */
export interface MeterReading extends ReadingEntry {
  readonly loggedAt: Date;
  readonly loggedById: string | null;
  readonly loggedByName: string | null;
  readonly voidedAt: Date | null;
  readonly voidedById: string | null;
  readonly voidReason: string | null;
  readonly version: number;
}

export type AddReadingResult =
  | { readonly outcome: 'stored' }
  /** The id is there already; `same` says whether its content is what was sent now. */
  | { readonly outcome: 'already-stored'; readonly same: boolean }
  | { readonly outcome: 'refused'; readonly refusal: ReadingRefusal };

export type ChangeReadingResult =
  | { readonly outcome: 'done' }
  /** Somebody changed the reading meanwhile; nothing was done. */
  | { readonly outcome: 'changed-meanwhile'; readonly lastChange: LastChange | null }
  | { readonly outcome: 'refused'; readonly refusal: ReadingRefusal };

interface Wish {
  readonly readingId: string;
  /** The version the person saw. */
  readonly version: number;
  readonly personId: string;
}

const columns = {
  id: 'meter_readings.id',
  assetId: 'meter_readings.asset_id',
  readOn: 'meter_readings.read_on',
  hours: 'meter_readings.hours',
  meterChanged: 'meter_readings.meter_changed',
  loggedAt: 'meter_readings.logged_at',
  loggedById: 'meter_readings.logged_by',
  loggedByName: 'people.name',
  voidedAt: 'meter_readings.voided_at',
  voidedById: 'meter_readings.voided_by',
  voidReason: 'meter_readings.void_reason',
  version: 'meter_readings.version',
};

export async function findReading(db: Database, readingId: string): Promise<MeterReading | undefined> {
  return joined(db).where('meter_readings.id', readingId).first<MeterReading | undefined>(columns);
}

/** The last readings of an asset, the latest first, voided ones among them. */
export async function listReadings(db: Database, assetId: string, limit: number): Promise<MeterReading[]> {
  return joined(db)
    .where('meter_readings.asset_id', assetId)
    .select<MeterReading[]>(columns)
    .orderBy([
      { column: 'meter_readings.read_on', order: 'desc' },
      { column: 'meter_readings.logged_at', order: 'desc' },
    ])
    .limit(limit);
}

function joined(db: Database) {
  return db('meter_readings').leftJoin('people', 'people.id', 'meter_readings.logged_by');
}

/**
 * Stores a reading, once however often it is sent.
 *
 * @param input.today the day it is, in the organisation's zone.
 */
export async function addReading(
  db: Database,
  input: { entry: ReadingEntry; personId: string; now: Date; today: string },
): Promise<AddReadingResult> {
  const { entry, personId, now, today } = input;
  return answeringRefusals(db, entry, today, async (trx): Promise<AddReadingResult> => {
    const asset = await lockAsset(trx, entry.assetId);
    if (!asset) return { outcome: 'refused', refusal: { code: 'unknown-asset' } };
    const stored = await findReading(trx, entry.id);
    if (stored) return answerStored(stored, entry, personId);
    const refusal = refuseReading(asset, entry, await neighboursOf(trx, entry), today);
    if (refusal) return { outcome: 'refused', refusal };

    const inserted = await trx('meter_readings')
      .insert({
        id: entry.id,
        asset_id: entry.assetId,
        read_on: entry.readOn,
        hours: entry.hours,
        meter_changed: entry.meterChanged,
        logged_at: now,
        logged_by: personId,
      })
      .onConflict('id')
      .ignore()
      .returning('id');
    // The same id for another asset was stored between the look and the insert.
    if (inserted.length === 0) return { outcome: 'refused', refusal: { code: 'id-taken' } };
    await writeAudit(trx, {
      personId,
      action: 'log',
      subject: 'meter-reading',
      subjectId: entry.id,
      after: entry,
    });
    return { outcome: 'stored' };
  });
}

function answerStored(stored: MeterReading, entry: ReadingEntry, personId: string): AddReadingResult {
  if (stored.assetId !== entry.assetId || stored.loggedById !== personId) {
    return { outcome: 'refused', refusal: { code: 'id-taken' } };
  }
  const same =
    stored.readOn === entry.readOn &&
    stored.hours === entry.hours &&
    stored.meterChanged === entry.meterChanged &&
    stored.voidedAt === null;
  return { outcome: 'already-stored', same };
}

/**
 * Voids a reading: it stays, with the reason, and counts no more. Refused where the readings left would go
 * back, as when it is the first one of a new meter.
 */
export async function voidReading(
  db: Database,
  input: Wish & { reason: string; now: Date },
): Promise<ChangeReadingResult> {
  return db.transaction(async (trx): Promise<ChangeReadingResult> => {
    const reading = await lockReading(trx, input, 'void');
    if (!reading) return answerChanged(trx, input, 'void');
    const refusal = refuseVoid(await neighboursOf(trx, reading));
    if (refusal) return { outcome: 'refused', refusal };
    await trx('meter_readings')
      .where('id', reading.id)
      .update({
        voided_at: input.now,
        voided_by: input.personId,
        void_reason: input.reason,
        version: reading.version + 1,
      });
    await writeAudit(trx, {
      personId: input.personId,
      action: 'void',
      subject: 'meter-reading',
      subjectId: reading.id,
      before: { voided: false },
      after: { voided: true, reason: input.reason },
    });
    return { outcome: 'done' };
  });
}

/** Takes a void back, unless the asset's dates or its other readings have made the reading impossible. */
export async function restoreReading(
  db: Database,
  input: Wish & { today: string },
): Promise<ChangeReadingResult> {
  const found = await findReading(db, input.readingId);
  if (!found) return { outcome: 'changed-meanwhile', lastChange: null };
  return answeringRefusals(db, found, input.today, async (trx): Promise<ChangeReadingResult> => {
    const reading = await lockReading(trx, input, 'restore');
    if (!reading) return answerChanged(trx, input, 'restore');
    const asset = await findAsset(trx, reading.assetId);
    if (!asset) return { outcome: 'refused', refusal: { code: 'unknown-asset' } };
    const refusal = refuseReading(asset, reading, await neighboursOf(trx, reading), input.today);
    if (refusal) return { outcome: 'refused', refusal };
    await trx('meter_readings')
      .where('id', reading.id)
      .update({
        voided_at: null,
        voided_by: null,
        void_reason: null,
        version: reading.version + 1,
      });
    await writeAudit(trx, {
      personId: input.personId,
      action: 'restore',
      subject: 'meter-reading',
      subjectId: reading.id,
      before: { voided: true, reason: reading.voidReason },
      after: { voided: false },
    });
    return { outcome: 'done' };
  });
}

/**
 * What the database's own rules refuse is told as a refusal too: somebody stored the reading it stumbles
 * over, past the lock, between the look and the write, and by now it can be seen.
 */
async function answeringRefusals<Result>(
  db: Database,
  reading: ReadingEntry,
  today: string,
  write: (trx: Database) => Promise<Result>,
): Promise<Result | { outcome: 'refused'; refusal: ReadingRefusal }> {
  try {
    return await db.transaction(write);
  } catch (error) {
    const constraint = constraintOf(error);
    if (constraint !== 'meter_reading_goes_back' && constraint !== 'meter_readings_asset_day') throw error;
    const asset = await findAsset(db, reading.assetId);
    const refusal = asset && refuseReading(asset, reading, await neighboursOf(db, reading), today);
    if (!refusal) throw error;
    return { outcome: 'refused', refusal };
  }
}

/** Readings of one asset are taken one after the other, so that each is held against all before it. */
async function lockAsset(trx: Database, assetId: string): Promise<Asset | undefined> {
  // Not a full lock: rows that refer to the asset may still be written elsewhere.
  await trx('assets').where('id', assetId).forNoKeyUpdate().select('id');
  return findAsset(trx, assetId);
}

/** The reading in the state and version the person saw, its asset locked; undefined when it is so no more. */
async function lockReading(
  trx: Database,
  wish: Wish,
  action: 'void' | 'restore',
): Promise<MeterReading | undefined> {
  const found = await findReading(trx, wish.readingId);
  if (!found) return undefined;
  await lockAsset(trx, found.assetId);
  const reading = await findReading(trx, wish.readingId);
  const isVoid = reading?.voidedAt != null;
  return reading?.version === wish.version && isVoid === (action === 'restore') ? reading : undefined;
}

async function neighboursOf(db: Database, reading: ReadingEntry): Promise<Neighbours> {
  const others = () =>
    db('meter_readings').where('asset_id', reading.assetId).whereNull('voided_at').whereNot('id', reading.id);
  const shown = { readOn: 'read_on', hours: 'hours', meterChanged: 'meter_changed' };
  const before = await others()
    .where('read_on', '<', reading.readOn)
    .orderBy('read_on', 'desc')
    .first<ShownHours | undefined>(shown);
  const sameDay = await others().where('read_on', reading.readOn).first<ShownHours | undefined>(shown);
  const after = await others()
    .where('read_on', '>', reading.readOn)
    .orderBy('read_on')
    .first<ShownHours | undefined>(shown);
  return { before: before ?? null, sameDay: sameDay ?? null, after: after ?? null };
}

/** The same wish of the same person sent twice is done; anything else is somebody's change in between. */
async function answerChanged(
  trx: Database,
  wish: Wish,
  action: 'void' | 'restore',
): Promise<ChangeReadingResult> {
  const lastChange = await findLastChange(trx, { subject: 'meter-reading', subjectId: wish.readingId });
  const reading = await findReading(trx, wish.readingId);
  const sentTwice =
    reading?.version === wish.version + 1 &&
    lastChange?.action === action &&
    lastChange.personId === wish.personId;
  return sentTwice ? { outcome: 'done' } : { outcome: 'changed-meanwhile', lastChange };
}
