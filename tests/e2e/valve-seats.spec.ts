import { readFileSync } from 'node:fs';
import { figure, openClass, storedAssessment } from './support/class-records';
import { previewCounts, upload, writeAll } from './support/imports';
import { expectNear } from './support/near';
import { signedInState } from './support/people';
import { runNightly } from './support/run-nightly';
import { expect, test } from './support/test';

// 48 valve-seat replacements on 41 diesel engines: Nelson & Doganaksoy 1989; R package survival, `valveSeat`.
// U, the military-handbook statistic and the slope with its profile interval were computed from it in R.
const register = 'tests/e2e/data/valve-seats-register.csv';
const history = 'tests/e2e/data/valve-seats-history.csv';
const engines = 41;
const replacements = 48;

test.use({ person: 'admin' });

test('valve seats: imported through the screens, assessed by the night, read on the class page', async ({
  page,
  browser,
  baseURL,
}) => {
  test.setTimeout(240_000);
  expect(readFileSync(history, 'utf8').trim().split('\n')).toHaveLength(replacements + 1);

  await test.step('the register and the history go in', async () => {
    await upload(page, 'register', register);
    expect(await previewCounts(page)).toEqual({ new: engines, changed: 0, unchanged: 0, rejected: 0 });
    await writeAll(page);
    await upload(page, 'history', history);
    expect(await previewCounts(page)).toEqual({ new: replacements, changed: 0, unchanged: 0, rejected: 0 });
    await writeAll(page);
  });

  await test.step('the night computes the published numbers', async () => {
    expect(await runNightly()).toMatch(/; 0 could not be computed/);
    const { trend } = (await storedAssessment('Valve seat')).detail.findings;
    expectNear(trend.laplace?.u, 2.378693, 1e-5);
    expectNear(trend.militaryHandbook?.statistic, 66.14835, 1e-5);
    expect(trend.militaryHandbook?.degreesOfFreedom).toBe(2 * replacements);
    if (trend.slope.kind !== 'fit') throw new Error('the slope was not estimated');
    expectNear(trend.slope.shape, 1.399579, 1e-5);
    expectNear(trend.slope.shapeInterval.low, 1.09487, 1e-5);
    expectNear(trend.slope.shapeInterval.high, 1.75534, 1e-5);
  });

  await test.step('the lead reads them', async () => {
    const storageState = await signedInState('lead', baseURL ?? '');
    const desk = await browser.newContext({ storageState, baseURL });
    const leadPage = await desk.newPage();
    await openClass(leadPage, 'Valve seat');
    await expect(figure(leadPage, 'Laplace U')).toContainText('2.38');
    await expect(figure(leadPage, 'Military-handbook test')).toContainText('66.15 on 96 df');
    await expect(figure(leadPage, 'Slope')).toContainText('1.40');
    await expect(figure(leadPage, 'Slope')).toContainText(/1\.09.*1\.76.*48/s);
    await desk.close();
  });

  await test.step('the same files again change nothing', async () => {
    await upload(page, 'register', register);
    expect(await previewCounts(page)).toEqual({ new: 0, changed: 0, unchanged: engines, rejected: 0 });
    await expect(page.getByRole('button', { name: /^Write/ })).toHaveCount(0);
    await upload(page, 'history', history);
    expect(await previewCounts(page)).toEqual({ new: 0, changed: 0, unchanged: replacements, rejected: 0 });
    await expect(page.getByRole('button', { name: /^Write/ })).toHaveCount(0);
  });
});
