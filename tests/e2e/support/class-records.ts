import type { Page } from '@playwright/test';
import { z } from 'zod';
import { database } from '../../../db/connection';

const fit = z.object({
  kind: z.literal('fit'),
  shape: z.number(),
  scale: z.number(),
  shapeInterval: z.object({ low: z.number(), high: z.number() }),
});

const storedSchema = z.object({
  verdict: z.string(),
  detail: z.object({
    findings: z.object({
      trend: z.object({
        laplace: z.object({ u: z.number() }).nullable(),
        militaryHandbook: z.object({ statistic: z.number(), degreesOfFreedom: z.number() }).nullable(),
        slope: z.union([fit, z.object({ kind: z.literal('cannot-be-estimated') })]),
      }),
      life: z.object({
        fit: z.union([fit, z.object({ kind: z.literal('cannot-be-estimated') })]),
        failuresToSettle: z.object({ more: z.number() }).nullable(),
      }),
    }),
    conclusion: z.object({
      headline: z.object({ claim: z.string(), support: z.string() }),
      together: z.string(),
    }),
  }),
});

/** The assessment in force of a class, with all its digits, as it is stored. */
export async function storedAssessment(className: string) {
  const row: unknown = await database()('assessments as a')
    .join('asset_classes as c', 'c.current_assessment_id', 'a.id')
    .where('c.name', className)
    .first('a.verdict', 'a.detail');
  return storedSchema.parse(row);
}

/** Id of a class, an asset's tag or a site by its name. @throws when there is none */
export async function idOf(table: 'asset_classes' | 'assets' | 'sites', name: string): Promise<string> {
  const column = table === 'assets' ? 'tag' : 'name';
  const row: unknown = await database()(table).where(column, name).first('id');
  return z.object({ id: z.string() }).parse(row).id;
}

/** Failures stored for an asset, voided ones too, the latest entry first. */
export async function failuresOf(tag: string) {
  const rows: unknown = await database()('failures as f')
    .join('assets as a', 'a.id', 'f.asset_id')
    .where('a.tag', tag)
    .orderBy('f.logged_at', 'desc')
    .select('f.id', 'f.voided_at', 'f.note');
  return z
    .array(z.object({ id: z.string(), voided_at: z.date().nullable(), note: z.string().nullable() }))
    .parse(rows);
}

/** Some asset at a site. */
export async function assetAt(siteName: string): Promise<{ id: string; tag: string }> {
  const row: unknown = await database()('assets as a')
    .join('sites as s', 's.id', 'a.site_id')
    .where('s.name', siteName)
    .orderBy('a.tag')
    .first('a.id', 'a.tag');
  return z.object({ id: z.string(), tag: z.string() }).parse(row);
}

/** Some asset of a class. */
export async function assetOfClass(className: string): Promise<{ id: string; tag: string }> {
  const row: unknown = await database()('assets as a')
    .join('asset_classes as c', 'c.id', 'a.class_id')
    .where('c.name', className)
    .orderBy('a.tag')
    .first('a.id', 'a.tag');
  return z.object({ id: z.string(), tag: z.string() }).parse(row);
}

/** Id of some alarm that nobody has cleared. */
export async function alarmInForce(): Promise<string> {
  const row: unknown = await database()('alarms').whereNull('cleared_at').first('id');
  return z.object({ id: z.string() }).parse(row).id;
}

/** Id of some failure at a site. */
export async function failureAt(siteName: string): Promise<string> {
  const row: unknown = await database()('failures as f')
    .join('assets as a', 'a.id', 'f.asset_id')
    .join('sites as s', 's.id', 'a.site_id')
    .where('s.name', siteName)
    .whereNull('f.voided_at')
    .first('f.id');
  return z.object({ id: z.string() }).parse(row).id;
}

/** Opens a class's page from the list of classes. */
export async function openClass(page: Page, name: string): Promise<void> {
  await page.goto('/classes');
  await page.getByRole('link', { name, exact: true }).click();
  await page.getByRole('heading', { level: 1, name }).waitFor();
}

/** What a page's list of figures says under a name. */
export function figure(page: Page, name: string) {
  return page
    .locator('dt')
    .filter({ hasText: new RegExp(`^${name}$`) })
    .locator('xpath=following-sibling::dd[1]');
}
