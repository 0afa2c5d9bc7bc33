import type { Page } from '@playwright/test';

type UploadedFile = string | { name: string; mimeType: string; buffer: Buffer };

/** A small CSV file made of lines. */
export function csvFile(name: string, lines: readonly string[]) {
  return { name, mimeType: 'text/csv', buffer: Buffer.from(`${lines.join('\n')}\n`) };
}

/** Uploads a file through the screens, as far as its preview. */
export async function upload(page: Page, kind: 'register' | 'history', file: UploadedFile): Promise<void> {
  await page.goto('/imports');
  await page.getByRole('link', { name: 'Import a file' }).click();
  await chooseAndSend(page, kind, file);
}

/** Fills in the upload form that is open. */
export async function chooseAndSend(
  page: Page,
  kind: 'register' | 'history',
  file: UploadedFile,
): Promise<void> {
  await page.getByRole('radio', { name: new RegExp(`^${kind}`, 'i') }).check();
  await page.getByLabel('CSV file').setInputFiles(file);
  await page.getByRole('button', { name: 'Upload and look' }).click();
  await statusList(page).waitFor({ timeout: 30_000 });
}

const statusList = (page: Page) => page.getByRole('navigation', { name: 'Rows by what becomes of them' });

/** How many rows the preview says are new, changed, unchanged and rejected. */
export async function previewCounts(page: Page) {
  const countOf = async (status: string) => {
    const text = await statusList(page)
      .getByRole('link', { name: new RegExp(`${status}$`) })
      .filter({ has: page.getByText(status, { exact: true }) })
      .locator('b')
      .innerText();
    return Number(text);
  };
  return {
    new: await countOf('new'),
    changed: await countOf('changed'),
    unchanged: await countOf('unchanged'),
    rejected: await countOf('rejected'),
  };
}

/** Writes all rows of the preview that is open. */
export async function writeAll(page: Page): Promise<void> {
  await page.getByRole('button', { name: /all or nothing/ }).click();
  await page.getByText(/^Applied /).waitFor({ timeout: 30_000 });
}
