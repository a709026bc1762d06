import { beforeAll, describe, expect, it } from 'vitest';
import { fitsForm, levelsForm, levelsProposal, proposalQuery } from '../../../src/lib/schemas/calibration';
import { AuditEvent } from '../../../src/lib/server/db/models/audit-event';
import { Lab } from '../../../src/lib/server/db/models/lab';
import { Conflict, Forbidden, Invalid, NotFound } from '../../../src/lib/server/errors';
import { chooseFit, chooseFits, proposeFits } from '../../../src/lib/server/services/calibration-choices';
import { changeLevels, proposeLevels } from '../../../src/lib/server/services/calibration-level-changes';
import { getCalibrationFit, getCalibrationSet } from '../../../src/lib/server/services/calibrations';
import type { PanelEntry } from '../../../src/lib/server/db/models/panel-entry';
import type { MovedFigureView } from '../../../src/lib/views/calibration';
import { walkBackView } from '../../../src/lib/server/services/results';
import { makeMember } from '../../factories/member';
import { makeVariant } from '../../factories/variant';
import { openBench, portions, type Bench, type Row } from './bench';

/*
 * Levels 1, 2, 5, 10, 20 ng/mL, L3 injected twice; areas 1100, 2050, 4900, 5100, 9800, 18500. S1 and S2 read 5000 and 7000 (external);
 * 1 mL, 20 ng spiked; criteria 30 to 130 % of the mean, two portions at least. Worked in base R 4 (stats):
 *
 *   x <- c(1, 2, 5, 5, 10, 20); y <- c(1100, 2050, 4900, 5100, 9800, 18500)
 *   s <- c(5000, 7000); recovery <- function(v) mean(v) * 100/20
 *   average    recovery(s/mean(y/x))                                         29.8507462687: outside
 *   weighted   w <- coef(lm(y ~ x, weights = 1/x^2)); recovery((s - w[1])/w[2])   30.6700916932
 *   corrected  average with every level twice as high                        59.7014925373
 */
const areas: readonly (readonly [level: string, injection: number, area: number])[] = [
  ['L1', 1, 1100],
  ['L2', 1, 2050],
  ['L3', 1, 4900],
  ['L3', 2, 5100],
  ['L4', 1, 9800],
  ['L5', 1, 18500]
];
const byR = { average: 29.8507462687, weighted: 30.6700916932, corrected: 59.7014925373 } as const;

interface Case {
  readonly bench: Bench;
  readonly setId: string;
  readonly experiment: number;
  readonly one: PanelEntry;
  readonly other: PanelEntry;
}

async function filled(): Promise<Case> {
  const bench = await openBench([
    { type: 'mean recovery', low: 30, high: 130 },
    { type: 'minimum preparations', low: 2, high: null, unit: 'count' },
    { type: 'calibration error', low: null, high: 8 }
  ]);
  const one = await bench.entry('One');
  const other = await bench.entry('Other');
  const setId = await bench.calibration({
    levels: ['1', '2', '5', '10', '20'].map((concentrationNgPerMl, index) => ({
      label: `L${index + 1}`,
      concentrationNgPerMl
    }))
  });
  await makeVariant(bench.made.study, { code: 'A' });
  const experiment = await bench.experiment({
    variantCode: 'A',
    calibrationSetId: setId,
    spikes: [{ kind: 'spiked', targetsNg: '20' }],
    finalVolumeMl: '1',
    replicates: [portions('spiked', ['S1', 'S2'])]
  });
  await bench.upload(
    [
      ['Sample', 'Analyte', 'Peak area', 'Injection'],
      ...areas.flatMap(([level, injection, area]) =>
        ['One', 'Other'].map((name): Row => [level, name, area, injection])
      ),
      ...[
        ['S1', 5000],
        ['S2', 7000]
      ].flatMap(([sample, area]) => ['One', 'Other'].map((name): Row => [sample!, name, area!, 1]))
    ],
    { experiment }
  );
  return { bench, setId, experiment, one, other };
}

const query = (typed: object) => proposalQuery.parse({ model: 'linear', weighting: '1/x2', ...typed });
const form = (typed: object) =>
  fitsForm.parse({ model: 'linear', weighting: '1/x2', reason: 'the low levels read better', ...typed });
const propose = ({ bench, setId }: Case, typed: object, actor = bench.actor) =>
  proposeFits(actor, bench.code, setId, query(typed));
const of = (moved: readonly MovedFigureView[], name: string) => moved.find((item) => item.name === name);
const mean = async ({ bench, experiment }: Case, name: string) => (await bench.result(experiment, name)).mean;

describe('what a choice moves, told before it is stored', () => {
  let made: Case;
  beforeAll(async () => {
    made = await filled();
  });

  it('is what the figures then are, to the last digit', async () => {
    const { bench, setId, one, experiment } = made;
    const { moves, entries } = await propose(made, { entries: [one.id] });
    const moved = of(moves.moved, 'One');
    expect(moved?.before).toBeCloseTo(byR.average, 8);
    expect(moved?.after).toBeCloseTo(byR.weighted, 8);
    expect(moved?.points).toBeCloseTo(byR.weighted - byR.average, 8);
    expect(moved?.verdicts[0]).toBe('outside');
    expect(moves.sentence).toContain('One in experiment 1 goes from outside to');
    expect([moves.moved.length, moves.unmoved]).toEqual([1, 1]);
    // The only stage that is measured takes what is not recovered.
    const [loss, ...others] = moves.losses;
    expect(others).toEqual([]);
    expect(loss).toMatchObject({ variant: 'A', stage: 'Extraction', name: 'One' });
    expect(loss?.before).toBeCloseTo(100 - byR.average, 8);
    expect(loss?.after).toBeCloseTo(100 - byR.weighted, 8);
    // Nothing is stored by looking.
    expect(await mean(made, 'One')).toBeCloseTo(byR.average, 8);

    const revisions = await chooseFits(
      bench.actor,
      bench.code,
      setId,
      form({
        entries: [one.id],
        seen: { [one.id]: String(entries[0]?.seenRevision) },
        foretold: moves.token
      })
    );
    expect(revisions.get(one.id)).toBe(1);
    const row = await bench.result(experiment, 'One');
    expect(row.mean).toBe(moved?.after);
    expect(row.n).toBe(moved?.n[1]);
    expect(row.verdict).toBe(moved?.verdicts[1]);
    expect(await mean(made, 'Other')).toBeCloseTo(byR.average, 8);
    const { walkBack } = await walkBackView(bench.actor, bench.code, { variant: 'A' }, (text) => text);
    const lost = walkBack.rows.find(({ name }) => name === 'One')?.losses.find((item) => item !== null);
    expect(lost?.lost).toBe(loss?.after);
  });

  it('does not hold once other data came: nothing is stored then', async () => {
    const { bench, setId, one, other } = made;
    const { moves } = await propose(made, { entries: [other.id], model: 'quadratic' });
    await chooseFit(bench.actor, bench.code, setId, {
      panelEntryId: one.id,
      seenRevision: 1,
      model: 'linear',
      weighting: 'none',
      levelsLeftOut: [],
      reason: 'another look'
    });
    await expect(
      chooseFits(
        bench.actor,
        bench.code,
        setId,
        form({ entries: [other.id], model: 'quadratic', foretold: moves.token })
      )
    ).rejects.toThrow(/after you looked/);
    expect((await getCalibrationSet(bench.actor, bench.code, setId)).fits[1]?.revision).toBe(0);
  });

  it('holds for this proposal alone', async () => {
    const { bench, setId, other } = made;
    const { moves } = await propose(made, { entries: [other.id], model: 'quadratic' });
    await expect(
      chooseFits(
        bench.actor,
        bench.code,
        setId,
        form({ entries: [other.id], model: 'linear', foretold: moves.token })
      )
    ).rejects.toBeInstanceOf(Conflict);
  });

  it('tells which readings leave the range, and how many portions are left', async () => {
    const { bench, setId, other, experiment } = made;
    const { levelList } = await getCalibrationSet(bench.actor, bench.code, setId);
    const levelsLeftOut = levelList.slice(3).map(({ id }) => id);
    const { moves } = await propose(made, {
      entries: [other.id],
      model: 'average response factor',
      levelsLeftOut
    });
    // By hand: without L4 and L5 the factors are 1100, 1025, 980 and 1020, 1031.25 on average: 7000 reads 6.79, above L3 at 5; 5000 reads 4.85.
    expect(moves.range).toEqual([
      {
        experiment,
        name: 'Other',
        text: '1 reading would lie above the highest level and give no amount',
        worse: true
      }
    ]);
    const moved = of(moves.moved, 'Other');
    expect(moved?.after).toBeCloseTo((100 * 5000) / 1031.25 / 20, 8);
    expect(moved?.n).toEqual([2, 1]);
    expect(moved?.verdicts[1]).toBe('too few');
    await chooseFits(
      bench.actor,
      bench.code,
      setId,
      form({ entries: [other.id], model: 'average response factor', levelsLeftOut, foretold: moves.token })
    );
    const row = await bench.result(experiment, 'Other');
    expect([row.mean, row.n, row.verdict]).toEqual([moved?.after, 1, 'too few']);
  });
});

describe('a choice for several analytes at once', () => {
  it('is foretold, stored and recorded as one, with a revision each', async () => {
    const made = await filled();
    const { bench, setId, one, other, experiment } = made;
    const entries = [one.id, other.id];
    const { moves } = await propose(made, { entries, levels: 'keep' });
    expect(moves.moved.map(({ name }) => name).sort()).toEqual(['One', 'Other']);
    await chooseFits(
      bench.actor,
      bench.code,
      setId,
      form({ entries, levels: 'keep', foretold: moves.token })
    );
    for (const name of ['One', 'Other'])
      expect((await bench.result(experiment, name)).mean).toBe(of(moves.moved, name)?.after);
    const events = await AuditEvent.findAll({
      where: { labId: bench.actor.labId, entity: 'calibration', entityId: setId }
    });
    expect(events).toHaveLength(1);
    expect(events[0]).toMatchObject({
      reason: 'the low levels read better',
      before: { One: 'average response factor', Other: 'average response factor' },
      after: { One: 'straight line, weighted 1/x²', Other: 'straight line, weighted 1/x²' }
    });
  });

  it('is refused as a whole where one of them was chosen meanwhile, and of two people one is told', async () => {
    const made = await filled();
    const { bench, setId, one, other } = made;
    const entries = [one.id, other.id];
    const { moves } = await propose(made, { entries });
    const both = await Promise.allSettled(
      [form({ entries, foretold: moves.token }), form({ entries, foretold: moves.token })].map((sent) =>
        chooseFits(bench.actor, bench.code, setId, sent)
      )
    );
    expect(both.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
    const refused = both.find((result) => result.status === 'rejected');
    expect(refused?.reason).toBeInstanceOf(Conflict);
    const { fits } = await getCalibrationSet(bench.actor, bench.code, setId);
    expect(fits.map(({ revision }) => revision)).toEqual([1, 1]);
  });

  it('names the analyte whose levels cannot be left out', async () => {
    const made = await filled();
    const { levelList } = await getCalibrationSet(made.bench.actor, made.bench.code, made.setId);
    const asked = propose(made, {
      entries: [made.one.id, made.other.id],
      levelsLeftOut: [levelList[2]?.id]
    });
    await expect(asked).rejects.toMatchObject({
      problems: [
        {
          path: 'levelsLeftOut',
          message: 'One: L3 lies within the range: levels are left out at its ends only.'
        },
        {
          path: 'levelsLeftOut',
          message: 'Other: L3 lies within the range: levels are left out at its ends only.'
        }
      ]
    });
  });
});

describe('levels that are changed after they were described', () => {
  let made: Case;
  beforeAll(async () => {
    made = await filled();
  });
  const rowsOf = async ({ bench, setId }: Case, factor: number) => {
    const set = await getCalibrationSet(bench.actor, bench.code, setId);
    return {
      seenVersion: String(set.version),
      levels: set.levelList.map(({ id, label }) => ({
        id,
        label,
        cells: Object.fromEntries(
          Object.entries(set.concentrations).map(([entry, held]) => [
            entry,
            String((held[id] ?? 0) * factor).replace('.', ',')
          ])
        ) as Record<string, string>
      }))
    };
  };
  const look = (typed: object) =>
    proposeLevels(made.bench.actor, made.bench.code, made.setId, levelsProposal.parse(typed));
  const store = (typed: object, foretold: string) =>
    changeLevels(
      made.bench.actor,
      made.bench.code,
      made.setId,
      levelsForm.parse({ ...typed, foretold, reason: 'the stock was made up double' })
    );

  it('move what was foretold, and the history holds both sides', async () => {
    const typed = await rowsOf(made, 2);
    const { rows, moves } = await look(typed);
    expect(rows).toHaveLength(10);
    expect(rows).toContainEqual({ what: 'One in L1, ng/mL', before: '1', after: '2' });
    const moved = of(moves.moved, 'One');
    expect(moved?.before).toBeCloseTo(byR.average, 8);
    expect(moved?.after).toBeCloseTo(byR.corrected, 8);
    expect(await mean(made, 'One')).toBeCloseTo(byR.average, 8);
    await store(typed, moves.token);
    expect(await mean(made, 'One')).toBe(moved?.after);

    const set = await getCalibrationSet(made.bench.actor, made.bench.code, made.setId);
    expect(set.version).toBe(2);
    expect(set.levelChanges).toMatchObject([
      { by: made.bench.actor.name, reason: 'the stock was made up double' }
    ]);
    expect(set.levelChanges[0]?.rows).toContainEqual({
      what: 'Other in L5, ng/mL',
      before: '20',
      after: '40'
    });
    // Who opened the page before is told.
    await expect(look(typed)).rejects.toBeInstanceOf(Conflict);
    await expect(store(typed, moves.token)).rejects.toBeInstanceOf(Conflict);
  });

  it('keep their areas when they are called otherwise, two names changed for each other too', async () => {
    const typed = await rowsOf(made, 1);
    const before = await mean(made, 'One');
    const renamed = {
      ...typed,
      levels: typed.levels.map((level) => ({
        ...level,
        label: level.label === 'L1' ? 'L2' : level.label === 'L2' ? 'L1' : level.label
      }))
    };
    const { moves, rows } = await look(renamed);
    expect(rows.map(({ what }) => what)).toEqual(['Level L1', 'Level L2']);
    expect(moves.moved).toEqual([]);
    await store(renamed, moves.token);
    expect(await mean(made, 'One')).toBe(before);
    const { levelList } = await getCalibrationSet(made.bench.actor, made.bench.code, made.setId);
    expect(levelList.map(({ label }) => label)).toEqual(['L2', 'L1', 'L3', 'L4', 'L5']);
  });

  it('can be one more, and that one be taken out again while no file has filled it', async () => {
    const typed = await rowsOf(made, 1);
    const more = {
      ...typed,
      levels: [...typed.levels, { id: '', label: 'L6', cells: { [made.one.id]: '0,2 µg/L' } }]
    };
    const added = await look(more);
    await store(more, added.moves.token);
    const now = await rowsOf(made, 1);
    expect(now.levels.at(-1)?.label).toBe('L6');
    expect(now.levels.at(-1)?.cells[made.one.id]).toBe('0,2');
    const less = {
      ...now,
      levels: now.levels.map((level) => (level.label === 'L6' ? { ...level, remove: 'on' } : level))
    };
    await store(less, (await look(less)).moves.token);
    expect((await rowsOf(made, 1)).levels).toHaveLength(5);
  });

  it('are neither taken out nor emptied where a file has filled them', async () => {
    const typed = await rowsOf(made, 1);
    const change = (at: number, to: object) => ({
      ...typed,
      levels: typed.levels.map((level, index) => (index === at ? { ...level, ...to } : level))
    });
    await expect(look(change(2, { remove: 'on' }))).rejects.toMatchObject({
      problems: [
        {
          path: 'levels.2.label',
          message:
            'L3 holds 2 injections of stored files, so it stays. A line can go without it at an end of the range, with a cause.'
        }
      ]
    });
    await expect(look(change(2, { cells: { [made.one.id]: '' } }))).rejects.toMatchObject({
      problems: [{ path: `levels.2.cells.${made.one.id}` }]
    });
    await expect(look(change(1, { label: 'L3' }))).rejects.toMatchObject({
      problems: [{ message: 'There are two levels called L3.' }]
    });
    expect(() => levelsProposal.parse(change(1, { cells: { [made.one.id]: '1,2,x' } }))).toThrow();
  });

  it('put no level that a line goes without inside its range', async () => {
    const { bench, setId, one } = made;
    const { levelList } = await getCalibrationSet(bench.actor, bench.code, setId);
    await chooseFit(bench.actor, bench.code, setId, {
      panelEntryId: one.id,
      seenRevision: 0,
      model: 'linear',
      weighting: 'none',
      levelsLeftOut: [levelList[0]?.id ?? ''],
      reason: 'contaminated'
    });
    const typed = await rowsOf(made, 1);
    const first = typed.levels[0]!;
    const inside = {
      ...typed,
      levels: [{ ...first, cells: { ...first.cells, [one.id]: '15' } }, ...typed.levels.slice(1)]
    };
    await expect(look(inside)).rejects.toThrow(/One goes without L2\. With these concentrations/);
  });

  it('say so where nothing differs', async () => {
    const typed = await rowsOf(made, 1);
    const { rows, moves } = await look(typed);
    expect(rows).toEqual([]);
    await expect(store(typed, moves.token)).rejects.toThrow(/Nothing differs/);
  });
});

describe('who may', () => {
  it('a reviewer looks at what a choice would move; only a chemist or a manager stores it', async () => {
    const made = await filled();
    const { bench, setId, one } = made;
    const lab = await Lab.findByPk(bench.actor.labId, { rejectOnEmpty: true });
    const inLab = (role: 'analyst' | 'reviewer' | 'manager') => makeMember({ lab, role });
    const reviewer = await inLab('reviewer');
    const { moves } = await propose(made, { entries: [one.id] }, reviewer);
    const sent = form({ entries: [one.id], foretold: moves.token });
    for (const actor of [reviewer, await inLab('analyst')]) {
      await expect(chooseFits(actor, bench.code, setId, sent)).rejects.toBeInstanceOf(Forbidden);
      await expect(
        proposeLevels(actor, bench.code, setId, levelsProposal.parse({ seenVersion: '1', levels: [] }))
      ).rejects.toBeInstanceOf(Forbidden);
    }
    const stranger = await makeMember();
    await expect(propose(made, { entries: [one.id] }, stranger)).rejects.toBeInstanceOf(NotFound);
    await expect(chooseFits(stranger, bench.code, setId, sent)).rejects.toBeInstanceOf(NotFound);
    await expect(
      changeLevels(
        stranger,
        bench.code,
        setId,
        levelsForm.parse({ seenVersion: '1', levels: [], foretold: 'x', reason: 'why not' })
      )
    ).rejects.toBeInstanceOf(NotFound);
    expect(await chooseFits(await inLab('manager'), bench.code, setId, sent)).toEqual(new Map([[one.id, 1]]));
    expect(() => form({ entries: [], foretold: 'x' })).toThrow();
    await expect(propose(made, { entries: [setId] })).rejects.toBeInstanceOf(NotFound);
    await expect(propose(made, { entries: [one.id], levelsLeftOut: [setId] })).rejects.toBeInstanceOf(
      Invalid
    );
  });
});

describe('one analyte looked at by itself', () => {
  it('has its readings, what it goes without, the proposed line and the way to the figures', async () => {
    const made = await filled();
    const { bench, setId, one } = made;
    const before = await getCalibrationSet(bench.actor, bench.code, setId);
    await chooseFit(bench.actor, bench.code, setId, {
      panelEntryId: one.id,
      seenRevision: 0,
      model: 'average response factor',
      weighting: 'none',
      levelsLeftOut: [before.levelList[0]?.id ?? ''],
      reason: 'contaminated'
    });
    const set = await getCalibrationSet(bench.actor, bench.code, setId);
    const fit = await getCalibrationFit(bench.actor, bench.code, set, one.id, {
      model: 'linear',
      weighting: 'none',
      levelsLeftOut: []
    });
    expect(fit?.sentence).toBe(
      'Area, read without a standard, average response factor, over L2 to L5 (2 to 20 ng/mL).'
    );
    // By hand: factors 1025, 980, 1020, 980, 925 have the mean 986; 1100 then reads 1.11562, 11.562 % above 1.
    expect(fit?.coefficients[0]).toBeCloseTo(986, 10);
    expect(fit?.aside).toHaveLength(1);
    expect(fit?.aside[0]).toMatchObject({ levelLabel: 'L1', concentration: 1 });
    expect(fit?.aside[0]?.errorPercent).toBeCloseTo(11.5619, 3);
    expect(fit?.readings).toMatchObject([{ experiment: 1, readings: 2, below: 0, above: 0 }]);
    expect(fit?.readings[0]?.href).toContain(`recovery:1:${one.id}`);
    expect(Object.keys(fit?.proposed?.errors ?? {})).toHaveLength(6);
    expect(fit?.candidates.find(({ inForce }) => inForce)).toBeUndefined();
    expect(fit?.next?.name).toBe('Other');
    expect(await getCalibrationFit(bench.actor, bench.code, set, setId)).toBeNull();
  });
});
