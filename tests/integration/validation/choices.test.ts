import { beforeAll, describe, expect, it } from 'vitest';
import { Lab } from '../../../src/lib/server/db/models/lab';
import { ValidationEvidence } from '../../../src/lib/server/db/models/validation-evidence';
import { sequelize } from '../../../src/lib/server/db/sequelize';
import { Conflict, Forbidden, Invalid, NotFound } from '../../../src/lib/server/errors';
import { listHistory } from '../../../src/lib/server/services/audit';
import { exclude } from '../../../src/lib/server/services/exclusions';
import { provenanceView } from '../../../src/lib/server/services/results';
import {
  chooseValidationEvidence,
  declareDuplicates,
  takeBackDuplicates,
  validationView
} from '../../../src/lib/server/services/validation';
import { validationCsv } from '../../../src/lib/server/reports/validation-csv';
import type { Actor } from '../../../src/lib/domain/actor';
import type { Role } from '../../../src/lib/domain/roles';
import type { ValidationPartKey } from '../../../src/lib/domain/validation-parts';
import type { ValidationPart } from '../../../src/lib/views/validation';
import type { PanelEntry } from '../../../src/lib/server/db/models/panel-entry';
import { makeMember } from '../../factories/member';
import { openBench, portions, type Bench } from '../by-hand/bench';

let bench: Bench;
let entry: PanelEntry;

/** Two levels in reagent water, the lower in two experiments of four spiked portions and four blanks each; ng in a litre. */
beforeAll(async () => {
  bench = await openBench([
    { type: 'mean recovery', low: 70, high: 130 },
    { type: 'duplicate difference', low: null, high: 30 },
    { type: 'individual recovery', low: 60, high: 140 }
  ]);
  entry = await bench.entry('Placein');
  await series('middle', '100', [91, 95, 88, 97], [], '2026-03-01');
  await series('low', '10', [8.8, 9.6, 9.1, 9.9], [0.2, 0.3, 0.1, 0.2], '2026-03-02');
  await series('low', '10', [9.2, 9.4, 8.7, 9.5], [0.3, 0.2, 0.2, 0.1], '2026-03-03');
});

async function series(
  levelLabel: string,
  targetsNg: string,
  spiked: readonly number[],
  blanks: readonly number[],
  performedOn: string
): Promise<void> {
  const labels = spiked.map((_, index) => `${performedOn} S${index + 1}`);
  const blankLabels = blanks.map((_, index) => `${performedOn} B${index + 1}`);
  const experiment = await bench.experiment({
    medium: 'reagent water',
    levelLabel,
    performedOn,
    spikes: [{ kind: 'spiked', targetsNg }],
    replicates: [
      portions('spiked', labels, { sampleVolumeMl: '1000' }),
      ...(blanks.length > 0 ? [portions('method blank', blankLabels, { sampleVolumeMl: '1000' })] : [])
    ]
  });
  await bench.upload(
    [
      ['Sample', 'Analyte', 'Amount (ng)'],
      ...labels.map((label, index) => [label, 'Placein', spiked[index] ?? null] as const),
      ...blankLabels.map((label, index) => [label, 'Placein', blanks[index] ?? null] as const)
    ],
    { experiment, confirmed: true }
  );
}

async function colleague(role: Role): Promise<Actor> {
  const lab = await Lab.findByPk(bench.actor.labId);
  if (!lab) throw new Error('the lab is gone');
  return makeMember({ role, lab });
}

async function part(key: ValidationPartKey, actor: Actor = bench.actor): Promise<ValidationPart> {
  const view = await validationView(actor, bench.code, {}, (address) => address);
  const found = view.parts.find((item) => item.key === key);
  if (!found) throw new Error(`no part ${key}`);
  return found;
}

const choice = (own: object = {}) => ({
  part: 'detection' as const,
  variantCode: '',
  experiments: [2],
  seen: '',
  reason: 'Closest to what is expected.',
  ...own
});

describe('which experiments stand for a part', () => {
  it('is suggested while nobody chose, and says that it is a suggestion', async () => {
    const { evidence, missing } = await part('detection');
    expect(evidence?.state).toBe('suggested');
    expect(evidence?.experiments.map(({ number }) => number)).toEqual([2, 3]);
    expect(missing).toContain('2 of 3 batches with spiked preparations.');
    expect((await part('demonstration')).evidence?.experiments.map(({ number }) => number)).toEqual([1]);
    // One level in one matrix, most batches: the two low ones.
    expect((await part('precision')).evidence?.experiments.map(({ number }) => number)).toEqual([2, 3]);
  });

  it('is chosen on record, changes the figures at once, and a second click changes nothing', async () => {
    await chooseValidationEvidence(bench.actor, bench.code, choice());
    const chosen = await part('detection');
    expect(chosen.evidence?.state).toBe('chosen');
    expect(chosen.evidence?.sentence).toContain('Closest to what is expected.');
    expect(chosen.tables[0]?.rows[0]?.why).toBe('4 of 7 spiked preparations, 4 of 7 method blanks');
    await chooseValidationEvidence(bench.actor, bench.code, choice());
    const events = (
      await listHistory(bench.actor, {
        study: bench.code,
        filter: { actor: null, entity: null, text: null, from: null, to: null }
      })
    ).events.filter(({ sentence }) => sentence.startsWith('Detection limits'));
    expect(events.map(({ sentence }) => sentence)).toEqual(['Detection limits rests on experiment 2.']);
  });

  it('refuses a choice made over one that the person has not seen', async () => {
    await expect(
      chooseValidationEvidence(bench.actor, bench.code, choice({ experiments: [2, 3] }))
    ).rejects.toThrow(Conflict);
    await chooseValidationEvidence(bench.actor, bench.code, choice({ experiments: [3, 2, 3], seen: '2' }));
    expect((await part('detection')).evidence?.experiments.map(({ number }) => number)).toEqual([2, 3]);
  });

  it('falls back to the suggestion when the choice is taken back', async () => {
    await chooseValidationEvidence(bench.actor, bench.code, choice({ experiments: [], seen: '2,3' }));
    expect((await part('detection')).evidence?.state).toBe('suggested');
  });

  it('names what is not there, and refuses who may not', async () => {
    await expect(
      chooseValidationEvidence(bench.actor, bench.code, choice({ experiments: [2, 77] }))
    ).rejects.toThrow(Invalid);
    await expect(
      chooseValidationEvidence(bench.actor, bench.code, choice({ variantCode: 'Q' }))
    ).rejects.toThrow(Invalid);
    for (const role of ['analyst', 'reviewer'] as const) {
      const member = await colleague(role);
      await expect(chooseValidationEvidence(member, bench.code, choice())).rejects.toThrow(Forbidden);
      expect((await part('detection', member)).tables).toHaveLength(1);
    }
  });

  it('is nobody else’s: another lab finds neither the study nor its figures', async () => {
    const stranger = await makeMember({ role: 'manager' });
    await expect(validationView(stranger, bench.code, {}, (address) => address)).rejects.toThrow(NotFound);
    await expect(chooseValidationEvidence(stranger, bench.code, choice())).rejects.toThrow(NotFound);
    await expect(
      provenanceView(stranger, bench.code, `detection:-:${entry.id}`, (address) => address)
    ).rejects.toThrow(NotFound);
  });

  it('cannot be changed under a study that is being reviewed, by SQL neither', async () => {
    await chooseValidationEvidence(bench.actor, bench.code, choice({ part: 'blanks' }));
    await sequelize.query(`UPDATE studies SET state = 'in review' WHERE id = '${bench.made.study.id}'`);
    try {
      await expect(
        chooseValidationEvidence(
          bench.actor,
          bench.code,
          choice({ part: 'blanks', experiments: [], seen: '2' })
        )
      ).rejects.toThrow(Conflict);
      await expect(ValidationEvidence.destroy({ where: { studyId: bench.made.study.id } })).rejects.toThrow(
        /its content cannot change/
      );
    } finally {
      await sequelize.query(`UPDATE studies SET state = 'draft' WHERE id = '${bench.made.study.id}'`);
    }
  });
});

describe('a detection limit', () => {
  it('opens down to the cell that a result stands in', async () => {
    const open = (address: string) => provenanceView(bench.actor, bench.code, address, (next) => next);
    const limit = await open(`detection:-:${entry.id}`);
    expect(limit.figure?.n).toBe('8 spiked, 8 blanks');
    const first = limit.tables[0]?.rows[0];
    const href = first?.cells.find((cell) => cell.href !== null)?.href;
    expect(first?.label).toBe('2026-03-02 S1');
    const amount = await open(href ?? '');
    expect(amount.cells.map(({ cell, rawText }) => `${cell} ${rawText}`)).toEqual(['C2 8.8']);
  });

  it('tells what a person set aside, and counts without it', async () => {
    const { replicates } = await bench.places(2);
    await exclude(bench.actor, bench.code, 2, {
      replicateId: replicates.get('2026-03-02 S4') ?? '',
      fractionId: null,
      analyteId: null,
      cause: 'Spiked twice.'
    });
    const { tables, notes } = await part('detection');
    expect(tables[0]?.rows[0]?.cells[0]?.value).toBe('7 + 8');
    expect(notes).toContain('Placein: 2026-03-02 S4 is set aside and not counted: Spiked twice.');
  });
});

describe('duplicates', () => {
  const pair = async (first: string, second: string, own: object = {}) => {
    const { replicates } = await bench.places(1);
    return {
      experimentNumber: 1,
      first: replicates.get(`2026-03-01 ${first}`) ?? '',
      second: replicates.get(`2026-03-01 ${second}`) ?? '',
      reason: 'Poured from one bottle.',
      ...own
    };
  };

  it('are none by themselves, and only what is declared is compared', async () => {
    const before = await part('duplicates');
    expect(before.pairs).toEqual([]);
    expect(before.tables.map(({ key }) => key)).toEqual(['single']);
    expect(before.missing).toContain('A pair of preparations declared duplicates of each other.');
    await declareDuplicates(bench.actor, bench.code, await pair('S1', 'S2'));
    await declareDuplicates(bench.actor, bench.code, await pair('S2', 'S1'));
    const after = await part('duplicates');
    expect(after.pairs.map(({ labels }) => labels)).toEqual([['2026-03-01 S1', '2026-03-01 S2']]);
    const [row] = after.tables[0]?.rows ?? [];
    // 200 |91 - 95|/(91 + 95)
    expect(row?.cells.at(-1)?.value).toBeCloseTo(800 / 186, 12);
    expect(row?.verdict).toBe('inside');
    const opened = await provenanceView(bench.actor, bench.code, row?.href ?? '', (address) => address);
    expect(opened.sentences[0]).toContain('Poured from one bottle.');
  });

  it('refuses a second duplicate of one preparation, another kind and a stranger’s', async () => {
    await expect(declareDuplicates(bench.actor, bench.code, await pair('S1', 'S3'))).rejects.toThrow(
      'has a duplicate already'
    );
    const { replicates } = await bench.places(2);
    const mixed = {
      experimentNumber: 2,
      first: replicates.get('2026-03-02 S1') ?? '',
      second: replicates.get('2026-03-02 B1') ?? '',
      reason: 'No.'
    };
    await expect(declareDuplicates(bench.actor, bench.code, mixed)).rejects.toThrow(Invalid);
    await expect(declareDuplicates(bench.actor, bench.code, await pair('S3', 'S3'))).rejects.toThrow(Invalid);
    const analyst = await colleague('analyst');
    await expect(declareDuplicates(analyst, bench.code, await pair('S3', 'S4'))).rejects.toThrow(Forbidden);
  });

  it('are taken back, by nobody of another lab', async () => {
    const [declared] = (await part('duplicates')).pairs;
    const form = { pair: declared?.id ?? '' };
    const stranger = await makeMember({ role: 'manager' });
    await expect(takeBackDuplicates(stranger, bench.code, form)).rejects.toThrow(NotFound);
    await takeBackDuplicates(bench.actor, bench.code, form);
    await expect(takeBackDuplicates(bench.actor, bench.code, form)).rejects.toThrow(NotFound);
    expect((await part('duplicates')).pairs).toEqual([]);
  });
});

describe('the same figures elsewhere', () => {
  it('stand unrounded in the CSV, with whether anybody chose', async () => {
    const view = await validationView(bench.actor, bench.code, {}, (address) => address);
    const csv = validationCsv(view, { study: bench.code, labName: 'Lab', labIsDemo: false });
    const table = view.parts.find(({ key }) => key === 'demonstration')?.tables[0];
    const mean = table?.rows[0]?.cells[1]?.value;
    // (91 + 95 + 88 + 97)/4
    expect(mean).toBe(92.75);
    expect(csv).toContain(',Placein,Mean,92.75,%,');
    expect(csv).toContain('"experiment 1, suggested, not chosen"');
  });
});
