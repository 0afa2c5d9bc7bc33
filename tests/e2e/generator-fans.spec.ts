import { figure, openClass, storedAssessment } from './support/class-records';
import { previewCounts, upload, writeAll } from './support/imports';
import { expectNear } from './support/near';
import { runNightly } from './support/run-nightly';
import { signedInState } from './support/people';
import { expect, test } from './support/test';

// 12 failures among 70 diesel-generator fans, in running hours: Nelson 1982; R package survival, `genfan`;
// shape and scale by survreg, the interval from the profile likelihood.
const fans = 70;
const failures = 12;

test.use({ person: 'admin' });

test('generator fans: too few failures to rule out wear-out, and the page says how many more would do', async ({
  page,
  browser,
  baseURL,
}) => {
  test.setTimeout(180_000);
  await upload(page, 'register', 'tests/e2e/data/generator-fans-register.csv');
  expect(await previewCounts(page)).toEqual({ new: fans, changed: 0, unchanged: 0, rejected: 0 });
  await writeAll(page);
  await upload(page, 'history', 'tests/e2e/data/generator-fans-history.csv');
  expect(await previewCounts(page)).toEqual({ new: failures, changed: 0, unchanged: 0, rejected: 0 });
  await writeAll(page);
  await runNightly();

  const { verdict, detail } = await storedAssessment('Generator fan');
  const { fit, failuresToSettle } = detail.findings.life;
  if (fit.kind !== 'fit') throw new Error('the shape was not estimated');
  expect(verdict).toBe('undecided');
  expectNear(fit.shape, 1.05845, 1e-5);
  expectNear(fit.scale, 26_296.8, 0.06);
  expectNear(fit.shapeInterval.low, 0.66886, 1e-5);
  expectNear(fit.shapeInterval.high, 1.55157, 1e-5);

  const storageState = await signedInState('lead', baseURL ?? '');
  const desk = await browser.newContext({ storageState, baseURL });
  const leadPage = await desk.newPage();
  await openClass(leadPage, 'Generator fan');
  await expect(figure(leadPage, 'Shape β')).toContainText(/1\.06.*0\.67.*1\.55.*12/s);
  await expect(figure(leadPage, 'Characteristic life')).toContainText(/^26.297.h/);
  await expect(leadPage.getByRole('main')).toContainText('undecided');
  const more = failuresToSettle?.more ?? 0;
  expect(more).toBeGreaterThan(0);
  await expect(leadPage.getByRole('main')).toContainText(
    new RegExp(`${more} more failures? would settle it`),
  );
  await desk.close();
});
