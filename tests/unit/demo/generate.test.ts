import { describe, expect, it } from 'vitest';
import { classSpecs } from '../../../fixtures/demo/classes';
import { generateDemo } from '../../../fixtures/demo/generate';
import { demoPeople } from '../../../fixtures/demo/people';
import { sites } from '../../../fixtures/demo/places';
import { firstDay, lastDay } from '../../../fixtures/demo/records';
import { truths } from '../../../fixtures/demo/truth';

const demo = generateDemo();
const assetOf = new Map(demo.assets.map((asset) => [asset.id, asset]));
const records = [...demo.failures, ...demo.plannedWork];

describe('the demo records', () => {
  it('are the same for the same seed and others for another', () => {
    expect(JSON.stringify(generateDemo())).toBe(JSON.stringify(demo));
    expect(JSON.stringify(generateDemo(7))).not.toBe(JSON.stringify(demo));
  });

  it('lie inside the dates of their assets', () => {
    const outside = records.filter(({ assetId, day, itemFittedDay }) => {
      const { inServiceDay, watchedFromDay, retiredDay } = assetOf.get(assetId)!;
      const isInside = day > inServiceDay && day >= watchedFromDay && day <= (retiredDay ?? lastDay);
      const isAgePossible = itemFittedDay === null || (itemFittedDay >= inServiceDay && itemFittedDay < day);
      return !isInside || !isAgePossible;
    });
    expect(outside).toEqual([]);
  });

  it('stand on assets whose own dates are possible', () => {
    const impossible = demo.assets.filter(
      ({ inServiceDay, watchedFromDay, itemFittedDay, retiredDay }) =>
        watchedFromDay !== Math.max(firstDay, inServiceDay) ||
        (itemFittedDay !== null && (itemFittedDay < inServiceDay || itemFittedDay > watchedFromDay)) ||
        (retiredDay ?? lastDay) <= watchedFromDay,
    );
    expect(impossible).toEqual([]);
  });

  it('happen in working hours and are logged and voided afterwards, before today', () => {
    const moment = (day: number, minute: number) => day * 1440 + minute;
    const impossible = records.filter(({ day, minute, loggedDay, loggedMinute, voided }) => {
      const logged = moment(loggedDay, loggedMinute);
      const isAtWork = minute === null || (minute >= 7 * 60 && minute <= 17 * 60);
      const isLoggedAfter = logged > moment(day, minute ?? 0) && loggedDay <= lastDay;
      const isVoidedAfter =
        voided === null || (moment(voided.day, voided.minute) > logged && voided.day <= lastDay);
      return !isAtWork || !isLoggedAfter || !isVoidedAfter;
    });
    expect(impossible).toEqual([]);
  });

  it('have at most one standing failure or renewal a position and day', () => {
    const seen = new Set<string>();
    const changes = [...demo.failures, ...demo.plannedWork.filter(({ renewed }) => renewed)];
    for (const { assetId, day, voided } of changes) {
      if (voided !== null || assetOf.get(assetId)!.quantity > 1) continue;
      const key = `${assetId} ${day}`;
      expect(seen.has(key)).toBe(false);
      seen.add(key);
    }
  });

  it('hold what real logbooks hold: patches, outside causes, voids, unknown ages, dates without a time', () => {
    expect(demo.failures.some(({ effect }) => effect === 'patched')).toBe(true);
    expect(demo.failures.some(({ outsideCause }) => outsideCause === 'vandalism')).toBe(true);
    expect(demo.failures.some(({ voided }) => voided !== null)).toBe(true);
    expect(demo.failures.some(({ minute }) => minute === null)).toBe(true);
    expect(demo.failures.some(({ itemFittedDay }) => itemFittedDay !== null)).toBe(true);
    expect(demo.assets.some(({ itemFittedDay, quantity }) => itemFittedDay === null && quantity === 1)).toBe(
      true,
    );
    expect(demo.assets.some(({ retiredDay }) => retiredDay !== null)).toBe(true);
    expect(demo.assets.some(({ inServiceDay }) => inServiceDay > firstDay)).toBe(true);
    expect(demo.plannedWork.some(({ renewed }) => !renewed)).toBe(true);
  });

  it('void no true record: each slip has its standing twin', () => {
    for (const slip of demo.failures.filter(({ voided }) => voided !== null)) {
      const twins = demo.failures.filter(
        (other) =>
          other.voided === null &&
          other.day === slip.day &&
          other.mode === slip.mode &&
          assetOf.get(other.assetId)!.className === assetOf.get(slip.assetId)!.className,
      );
      expect(twins.length).toBeGreaterThan(0);
    }
  });

  it('give unique ids and tags', () => {
    const ids = [...demo.assets, ...records].map(({ id }) => id);
    expect(new Set(ids).size).toBe(ids.length);
    const tags = demo.assets.map(({ tag }) => tag.toLowerCase());
    expect(new Set(tags).size).toBe(tags.length);
  });
});

describe('the demo classes', () => {
  it('are fourteen, each with its truth', () => {
    expect(classSpecs).toHaveLength(14);
    expect(truths.map(({ className }) => className).sort()).toEqual(
      classSpecs.map(({ name }) => name).sort(),
    );
  });

  it('write notes only for modes they have', () => {
    for (const spec of classSpecs) {
      const modes = truths
        .find(({ className }) => className === spec.name)!
        .hazards.flatMap((hazard) => Object.keys(hazard.modes));
      const others = Object.keys(spec.notes).filter((key) => key !== 'planned' && key !== 'outside');
      expect(modes.sort()).toEqual(expect.arrayContaining(others));
      if (spec.outside) expect(modes).toContain(spec.outside.mode);
    }
  });

  it('give the number of failures where the truth fixes it', () => {
    for (const { className, exactFailures } of truths.filter((truth) => truth.exactFailures !== undefined)) {
      const own = demo.failures.filter(({ assetId }) => assetOf.get(assetId)!.className === className);
      expect(own).toHaveLength(exactFailures!);
    }
  });
});

describe('the demo people', () => {
  it('fill every role, and the technicians cover every site once', () => {
    expect(new Set(demoPeople.map(({ role }) => role))).toEqual(
      new Set(['technician', 'lead', 'manager', 'admin']),
    );
    const covered = demoPeople.filter(({ role }) => role === 'technician').flatMap(({ sites: own }) => own);
    expect(covered.sort()).toEqual(Object.keys(sites).sort());
  });
});
