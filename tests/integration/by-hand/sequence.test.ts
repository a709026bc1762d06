import { beforeEach, describe, expect, it } from 'vitest';
import { checkStandardForm } from '../../../src/lib/schemas/check-standard';
import { Injection } from '../../../src/lib/server/db/models/injection';
import { Sequence } from '../../../src/lib/server/db/models/sequence';
import { Conflict, Forbidden, Invalid, NotFound } from '../../../src/lib/server/errors';
import {
  changeCheckStandard,
  createCheckStandard,
  getCheckStandards,
  removeCheckStandard
} from '../../../src/lib/server/services/check-standards';
import { previewImport } from '../../../src/lib/server/services/import-preview';
import { receiveFile, withdrawImport } from '../../../src/lib/server/services/imports';
import { getCalibrationSet } from '../../../src/lib/server/services/calibrations';
import { removePanelEntry } from '../../../src/lib/server/services/panels';
import { getSequence, listSequences } from '../../../src/lib/server/services/sequences';
import { makeLab } from '../../factories/lab';
import { makeMember } from '../../factories/member';
import { openBench, portions, type Bench, type Row } from './bench';

/*
 * Two analytes read externally, 100 area units per ng/mL at 10, 20, 50 and 100 ng/mL, so that the mean response factor is 100. Second source 70 to 130 %
 * and continuing checks 80 to 120 % of what they were made to (8270E; the drift of 8000D is 100 (found - nominal)/nominal). A check of
 * 50 ng/mL whose area is 6350 reads 63.5 ng/mL: 127 %, a drift of 27 %.
 */
const rules = [
  {},
  { type: 'minimum preparations', low: 2, high: null, unit: 'count' },
  { type: 'second-source check', low: 70, high: 130, citation: 'document one, 11.3' },
  { type: 'continuing check', low: 80, high: 120, citation: 'document one, 11.4' }
] as const;
const head = ['Sample', 'Analyte', 'Area', 'Final volume (mL)', 'Acquired at'];
const names = ['Firstin', 'Secondin'] as const;

let bench: Bench;
let setId: string;
let experiment: number;
let clock: number;

beforeEach(async () => {
  bench = await openBench(rules);
  for (const name of names) await bench.entry(name);
  setId = await bench.calibration({
    levels: [10, 20, 50, 100].map((concentrationNgPerMl, index) => ({
      label: `L${index + 1}`,
      concentrationNgPerMl
    }))
  });
  await describeCheck({ kind: 'second source', label: 'ICV', concentrationNgPerMl: '50' });
  await describeCheck({ kind: 'continuing', label: 'CCV', concentrationNgPerMl: '50' });
  await describeCheck({ kind: 'instrument blank', label: 'IB' });
  experiment = await bench.experiment({
    calibrationSetId: setId,
    spikes: [{ kind: 'spiked', targetsNg: '100' }],
    replicates: [portions('spiked', ['S1', 'S2', 'S3', 'S4'])]
  });
  clock = Date.parse('2026-03-04T08:00:00Z');
});

const describeCheck = (typed: Readonly<Record<string, unknown>>, set = setId): Promise<string> =>
  createCheckStandard(bench.actor, bench.code, set, checkStandardForm.parse(typed));

/** One injection an hour: both analytes, as areas; null leaves the cell empty. */
function injection(sample: string, first: number | null, second: number | null = first, timed = true): Row[] {
  const at = new Date(clock).toISOString().slice(0, 16).replace('T', ' ');
  clock += 3_600_000;
  const volume = sample.startsWith('S') ? 1 : null;
  return [
    [sample, 'Firstin', first, volume, timed ? at : null],
    [sample, 'Secondin', second, volume, timed ? at : null]
  ];
}

const levels = (timed = true): Row[] =>
  [10, 20, 50, 100].flatMap((concentration, index) =>
    injection(`L${index + 1}`, 100 * concentration, 100 * concentration, timed)
  );

/** Levels, second source, blank, check; S1 and S2 (80 and 82 ng/mL of 100 ng); the check at fault; S3 and S4; a check that holds. */
const day = (timed = true): Row[] => [
  head,
  ...levels(timed),
  ...injection('ICV', 5100, 5100, timed),
  ...injection('IB', 0, 0, timed),
  ...injection('CCV', 5000, 5000, timed),
  ...injection('S1', 8000, 8000, timed),
  ...injection('S2', 8200, 8200, timed),
  ...injection('CCV', 6350, 5200, timed),
  ...injection('S3', 8400, 8400, timed),
  ...injection('CCV', 4900, 4900, timed),
  ...injection('S4', 8600, 8600, timed),
  ...injection('CCV', 5000, 5000, timed)
];

async function onlyRun() {
  const [item, ...others] = await listSequences(bench.actor, bench.code);
  expect(others).toEqual([]);
  return getSequence(bench.actor, bench.code, item?.id ?? '');
}

describe('a run with its checks', () => {
  it('is read in its order, each check a reading of its own', async () => {
    await bench.upload(day(), { experiment, confirmed: true });
    const run = await onlyRun();
    expect(run.injections.map(({ label }) => label).join(' ')).toBe(
      'L1 L2 L3 L4 ICV IB CCV S1 S2 CCV S3 CCV S4 CCV'
    );
    expect(run.orderedBy).toBe('time');
    const drift = run.sets[0]?.drift.find(({ name, points }) => name === 'Firstin' && points.length > 1);
    expect(drift?.points.map(({ percent }) => Number(percent?.toFixed(9)))).toEqual([100, 127, 98, 100]);
    expect(drift?.points.map(({ fails }) => fails)).toEqual([false, true, false, false]);
    // ICV: 51 of 50 ng/mL.
    const second = run.sets[0]?.drift.find(({ name, points }) => name === 'Firstin' && points.length === 1);
    expect(second?.points[0]?.percent).toBeCloseTo(102, 9);
  });

  it('flags its bracket for the analyte alone; the figure keeps its value and says so, with the rule', async () => {
    await bench.upload(day(), { experiment, confirmed: true });
    const first = await bench.result(experiment, 'Firstin');
    // (80 + 82 + 84 + 86)/4 of 100 ng.
    expect(first.mean).toBeCloseTo(83, 9);
    expect(first.flagged).toBe(
      'rests on 3 flagged injections of 4: the continuing check among them, CCV at 17:00, read Firstin at 127 % of its concentration (80 to 120 % asked for)'
    );
    expect((await bench.result(experiment, 'Secondin')).flagged).toBeNull();
    expect((await bench.balance(experiment, 'Firstin')).flagged).toBe(first.flagged);
    const run = await onlyRun();
    expect(run.injections.filter(({ flagged }) => flagged > 0).map(({ label }) => label)).toEqual([
      'S1',
      'S2',
      'S3'
    ]);
    expect(run.flags).toHaveLength(1);
    expect(run.flags[0]?.rule.citation).toContain('document one, 11.4');
    expect(run.lead).toContain('3 of 4 extracts are flagged');
  });

  it('says nothing of checks to the line: the levels alone are its points', async () => {
    await bench.upload(day(), { experiment, confirmed: true });
    const set = await getCalibrationSet(bench.actor, bench.code, setId);
    expect(set.fits.map(({ points }) => points.length)).toEqual([4, 4]);
    expect(set.values).toBe(8);
  });

  it('without times stands in the order of the file, and a check many times under one label is told apart', async () => {
    await bench.upload(day(false), { experiment, confirmed: true });
    const run = await onlyRun();
    expect(run.orderedBy).toBe('file');
    expect(run.checks.map(({ name }) => name)).toEqual([
      'ICV',
      'IB',
      'CCV, injection 1',
      'CCV, injection 2',
      'CCV, injection 3',
      'CCV, injection 4'
    ]);
    expect((await bench.result(experiment, 'Firstin')).flagged).toContain('CCV, injection 2');
  });

  it('sorted analyte by analyte is the same run', async () => {
    const [, ...rows] = day(false);
    const sorted = names.flatMap((name) => rows.filter(([, analyte]) => analyte === name));
    await bench.upload([head, ...sorted], { experiment, confirmed: true });
    expect((await onlyRun()).injections.map(({ label }) => label).join(' ')).toBe(
      'L1 L2 L3 L4 ICV IB CCV S1 S2 CCV S3 CCV S4 CCV'
    );
  });

  it('is refused where a reading is missing and nothing tells of which injection', async () => {
    const rows = day(false).filter((_, index) => index !== 14);
    expect(rows).toHaveLength(28);
    await expect(bench.upload(rows, { experiment, confirmed: true })).rejects.toThrow(Invalid);
    const { importId } = await receiveFile(bench.actor, bench.code, {
      fileName: 'gap.csv',
      bytes: Buffer.from(rows.map((row) => row.map((cell) => cell ?? '').join(';')).join('\n')),
      experimentNumber: experiment
    });
    const preview = await previewImport(bench.actor, bench.code, importId, {
      sheet: null,
      fromRow: 1,
      fromRecord: 0
    });
    expect(preview.problems.map(({ message }) => message).join(' ')).toContain(
      'The check CCV was read 4 times, but Secondin 3 times only'
    );
  });

  it('that ends with an extract is not closed, which is a gap and no flag', async () => {
    const rows = day()
      .slice(0, -2)
      .filter(([sample], index) => sample !== 'CCV' || index < 20);
    await bench.upload(rows, { experiment, confirmed: true });
    const run = await onlyRun();
    expect(run.gaps.some(({ text }) => text.startsWith('No check closes the run'))).toBe(true);
  });
});

describe('a later file', () => {
  it("of another day brings checks that cover nothing and bracket nothing of the first day's", async () => {
    await bench.upload(day(), { experiment, confirmed: true });
    clock = Date.parse('2026-03-06T08:00:00Z');
    await bench.upload([head, ...injection('CCV', 9000), ...injection('CCV', 5000)], { confirmed: true });
    expect(await listSequences(bench.actor, bench.code)).toHaveLength(2);
    expect((await bench.result(experiment, 'Firstin')).flagged).toContain('3 flagged injections of 4');
    expect((await bench.result(experiment, 'Secondin')).flagged).toBeNull();
  });

  it('with the check of the same moment read anew covers it, with a reason, and gives it back when withdrawn', async () => {
    await bench.upload(day(), { experiment, confirmed: true });
    clock = Date.parse('2026-03-04T17:00:00Z');
    const again = [head, ...injection('CCV', 5100)];
    await expect(bench.upload(again, { confirmed: true })).rejects.toThrow(Invalid);
    const later = await bench.upload([...again, []], { confirmed: true, reason: 'integrated by hand' });
    expect((await onlyRun()).injections).toHaveLength(14);
    expect((await bench.result(experiment, 'Firstin')).flagged).toBeNull();
    await withdrawImport(bench.actor, bench.code, later, 'not agreed');
    expect((await bench.result(experiment, 'Firstin')).flagged).toContain('3 flagged injections of 4');
  });

  it('with one vial read anew leaves it between the checks of its day', async () => {
    await bench.upload(day(), { experiment, confirmed: true });
    clock = Date.parse('2026-03-04T16:00:00Z');
    await bench.upload([head, ...injection('S2', 8100)], {
      experiment,
      confirmed: true,
      reason: 'read anew'
    });
    const run = await onlyRun();
    expect(run.files).toHaveLength(2);
    expect((await bench.result(experiment, 'Firstin')).flagged).toContain('3 flagged injections of 4');
  });
});

describe('two sets whose checks go by one name', () => {
  it('are told apart by the experiment that a file belongs to, and asked about without one', async () => {
    const other = await bench.calibration({
      name: 'Other standards',
      levels: [{ label: 'L1', concentrationNgPerMl: 10 }]
    });
    await describeCheck({ kind: 'continuing', label: 'CCV', concentrationNgPerMl: '5' }, other);
    await bench.upload(day(), { experiment, confirmed: true });
    expect((await onlyRun()).sets.map(({ name }) => name)).toEqual(['Standards']);
    await expect(
      bench.upload([head, ...injection('CCV', 5000)], { confirmed: true, reason: 'x' })
    ).rejects.toThrow(Invalid);
  });
});

describe('describing a check', () => {
  it('is for chemists and managers, of their own lab', async () => {
    const lab = await makeLab();
    const stranger = await makeMember({ lab, role: 'chemist' });
    const form = checkStandardForm.parse({ kind: 'continuing', label: 'X', concentrationNgPerMl: '5' });
    await expect(createCheckStandard(stranger, bench.code, setId, form)).rejects.toThrow(NotFound);
    await expect(getCheckStandards(stranger, bench.code, setId)).rejects.toThrow(NotFound);
    for (const role of ['analyst', 'reviewer'] as const) {
      const actor = { ...bench.actor, role };
      await expect(createCheckStandard(actor, bench.code, setId, form)).rejects.toThrow(Forbidden);
      expect((await getCheckStandards(actor, bench.code, setId)).checks).toHaveLength(3);
    }
    await expect(getSequence(stranger, bench.code, setId)).rejects.toThrow(NotFound);
  });

  it('refuses a label that a file could not tell from another, a check of nothing, a blank of something', async () => {
    const messageOf = async (typed: Readonly<Record<string, unknown>>): Promise<string> =>
      describeCheck(typed).then(
        () => 'stored',
        (error: unknown) => (error instanceof Invalid ? (error.problems[0]?.message ?? '') : String(error))
      );
    expect(await messageOf({ kind: 'continuing', label: 'CCV', concentrationNgPerMl: '5' })).toContain(
      'already'
    );
    expect(await messageOf({ kind: 'continuing', label: 'L2', concentrationNgPerMl: '5' })).toContain(
      'level'
    );
    expect(await messageOf({ kind: 'continuing', label: 'C2' })).toContain('holds nothing yet');
    const [first] = await bench.panel();
    expect(
      await messageOf({ kind: 'instrument blank', label: 'B2', concentrations: { [first ?? '']: '5' } })
    ).toContain('A blank holds no analytes');
    // µg/L and decimal commas, as everywhere.
    expect(await messageOf({ kind: 'continuing', label: 'C3', concentrationNgPerMl: '12,5 µg/L' })).toBe(
      'stored'
    );
  });

  it('lets an analyte that is not measured leave the panel, with what checks were to hold of it', async () => {
    const spare = await bench.entry('Spare');
    await describeCheck({ kind: 'continuing', label: 'C4', concentrations: { [spare.id]: '5' } });
    await removePanelEntry(bench.actor, bench.code, spare.id);
    const { checks } = await getCheckStandards(bench.actor, bench.code, setId);
    expect(checks.find(({ label }) => label === 'C4')?.concentrations).toEqual([]);
  });

  it('is corrected with what was seen, keeps its kind once injected, and is removed only before', async () => {
    await bench.upload(day(), { experiment, confirmed: true });
    const { checks } = await getCheckStandards(bench.actor, bench.code, setId);
    const ccv = checks.find(({ label }) => label === 'CCV');
    const form = {
      kind: 'continuing' as const,
      label: 'CCV',
      source: '',
      note: 'made to 63.5 by mistake',
      concentrationNgPerMl: 63.5,
      concentrations: {},
      seenVersion: 1
    };
    await changeCheckStandard(bench.actor, bench.code, setId, ccv?.id ?? '', form);
    // 50 of 63.5 ng/mL is 78.7 %: now the other checks are outside.
    expect((await bench.result(experiment, 'Secondin')).flagged).toContain('4 injections, all flagged');
    await expect(changeCheckStandard(bench.actor, bench.code, setId, ccv?.id ?? '', form)).rejects.toThrow(
      Conflict
    );
    await expect(
      changeCheckStandard(bench.actor, bench.code, setId, ccv?.id ?? '', {
        ...form,
        kind: 'second source',
        seenVersion: 2
      })
    ).rejects.toThrow(Invalid);
    await expect(removeCheckStandard(bench.actor, bench.code, setId, ccv?.id ?? '')).rejects.toThrow(
      Conflict
    );
    const spare = await describeCheck({ kind: 'continuing', label: 'Spare', concentrationNgPerMl: '5' });
    await removeCheckStandard(bench.actor, bench.code, setId, spare);
    expect((await getCheckStandards(bench.actor, bench.code, setId)).checks).toHaveLength(3);
  });
});

describe('the database', () => {
  it('holds an injection to the kind of its check', async () => {
    const importId = await bench.upload(day(), { experiment, confirmed: true });
    const sequence = await Sequence.findOne({ where: { importId } });
    const { checks } = await getCheckStandards(bench.actor, bench.code, setId);
    const idOf = (label: string): string => checks.find((check) => check.label === label)?.id ?? '';
    const made = (kind: 'check' | 'blank', checkStandardId: string | null) =>
      Injection.create({
        labId: bench.actor.labId,
        studyId: bench.made.study.id,
        importId,
        sequenceId: sequence?.id ?? '',
        position: 99,
        kind,
        extractId: null,
        levelId: null,
        checkStandardId,
        runAt: null
      });
    await expect(made('blank', idOf('CCV'))).rejects.toThrow(/injections_check_kind/);
    await expect(made('check', idOf('IB'))).rejects.toThrow(/injections_check_kind/);
    await expect(made('check', null)).rejects.toThrow(/injections_check_standard/);
    await expect(made('blank', idOf('IB'))).resolves.toBeDefined();
  });
});
