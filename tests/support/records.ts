import { randomUUID } from 'node:crypto';
import type { Database } from '../../db/connection';

type Columns = Record<string, unknown>;

async function insert(db: Database, table: string, row: Columns): Promise<string> {
  const [added] = (await db(table).insert(row).returning('id')) as { id: string }[];
  return added!.id;
}

/** Adds an asset class and gives its id. */
export function addClass(db: Database, name: string, columns: Columns = {}): Promise<string> {
  return insert(db, 'asset_classes', { name, item_singular: 'pump', item_plural: 'pumps', ...columns });
}

/** Adds an asset in service and watched since 2024-01-01 unless said otherwise, and gives its id. */
export function addAsset(
  db: Database,
  place: { classId: string; siteId: string },
  tag: string,
  columns: Columns = {},
): Promise<string> {
  return insert(db, 'assets', {
    class_id: place.classId,
    site_id: place.siteId,
    tag,
    in_service_on: '2024-01-01',
    watched_from: '2024-01-01',
    ...columns,
  });
}

/** Adds a failure of an asset, renewed unless said otherwise, and gives its id. */
export function addFailure(
  db: Database,
  asset: { assetId: string; classId: string },
  day: string,
  columns: Columns = {},
): Promise<string> {
  return insert(db, 'failures', {
    id: randomUUID(),
    asset_id: asset.assetId,
    class_id: asset.classId,
    failed_on: day,
    effect: 'renewed',
    ...columns,
  });
}

/** Adds a planned replacement of an asset unless said otherwise, and gives its id. */
export function addPlannedWork(
  db: Database,
  asset: { assetId: string; classId: string },
  day: string,
  columns: Columns = {},
): Promise<string> {
  return insert(db, 'planned_work', {
    id: randomUUID(),
    asset_id: asset.assetId,
    class_id: asset.classId,
    done_on: day,
    kind: 'replace',
    renewed: true,
    ...columns,
  });
}
