import { createHash } from 'node:crypto';
import ExcelJS from 'exceljs';
import { beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '../../../src/lib/domain/actor';
import { broughtFile, importDetail, imports } from '../../../src/lib/schemas/api/records';
import { readStudyMeasurements } from '../../../src/lib/server/db/measurement-read';
import { Import } from '../../../src/lib/server/db/models/import';
import type { Lab } from '../../../src/lib/server/db/models/lab';
import { Study } from '../../../src/lib/server/db/models/study';
import { config } from '../../../src/lib/server/config';
import { makeAccessKey } from '../../../src/lib/server/services/access-keys';
import { keepColumnMap } from '../../../src/lib/server/services/column-maps';
import { createExperiment } from '../../../src/lib/server/services/experiments';
import { withdrawImport } from '../../../src/lib/server/services/imports';
import { makeExperimentForm } from '../../factories/experiment-form';
import { makeLab } from '../../factories/lab';
import { makeMember } from '../../factories/member';
import { makePanelEntry } from '../../factories/panel-entry';
import { makeStudy } from '../../factories/study';
import { auditOf } from '../access/people';
import { call, read } from './program';

let lab: Lab;
let chemist: Actor;
let key: string;
let study: Study;
let experiment: string;

const header = ['Sample', 'Fraction', 'Analyte', 'Amount (ng)'] as const;
type Rows = readonly (readonly (string | number)[])[];
const encoder = new TextEncoder();
const csv = (rows: Rows) => encoder.encode([header, ...rows].map((row) => row.join(',')).join('\n'));
const all = (first: string | number = 40): Rows => [
  ['S1', 'Elution', 'Alpha', first],
  ['S2', 'Elution', 'Alpha', 45],
  ['S3', 'Elution', 'Alpha', 50]
];

interface Sending {
  readonly query?: Readonly<Record<string, string>>;
  readonly type?: string;
  readonly key?: string;
}
const bring = async (body: BodyInit, { query, type, key: own }: Sending = {}) => {
  const response = await call({
    route: '/studies/[study]/imports',
    params: { study: study.code },
    query: { file: 'values.csv', experiment, ...query },
    key: own ?? key,
    headers: { 'content-type': type ?? 'application/octet-stream' },
    body
  });
  return { ...(await read(response)), location: response.headers.get('location') };
};

const counting = async (): Promise<readonly (number | null)[]> => {
  const rows = await readStudyMeasurements({ labId: study.labId, studyId: study.id });
  return rows.map(({ reported }) => reported).sort((a, b) => (a ?? 0) - (b ?? 0));
};
const version = async (): Promise<string | undefined> => (await Study.findByPk(study.id))?.dataVersion;

beforeAll(async () => {
  lab = await makeLab();
  chemist = await makeMember({ lab, role: 'chemist', name: 'Ada Brook' });
  ({ key } = await makeAccessKey(chemist, { name: 'rig', scopes: ['read', 'import'], days: null }));
});

beforeEach(async () => {
  ({ study } = await makeStudy(chemist));
  await makePanelEntry(study, { name: 'Alpha' });
  experiment = String(
    await createExperiment(
      chemist,
      study.code,
      makeExperimentForm({
        replicates: [{ kind: 'spiked', count: 3, labels: 'S1\nS2\nS3' }],
        spikes: [{ kind: 'spiked', targetsNg: '50' }]
      })
    )
  );
});

describe('a file that a program brings', () => {
  it('is stored whole, kept byte for byte, and on record as brought by the key', async () => {
    const bytes = csv(all());
    const { status, body, location } = await bring(bytes);
    expect(status).toBe(201);
    const brought = broughtFile.parse(body);
    expect(brought).toMatchObject({
      outcome: 'stored',
      import: {
        fileName: 'values.csv',
        state: 'stored',
        valueCount: 3,
        storedBy: 'Ada Brook',
        sha256: createHash('sha256').update(bytes).digest('hex')
      },
      questions: []
    });
    expect(location).toBe(`/api/v1/studies/${study.code}/imports/${brought.import.id}`);
    expect(await counting()).toEqual([40, 45, 50]);
    const file = await call({
      route: '/studies/[study]/imports/[import]/file',
      params: { study: study.code, import: brought.import.id },
      key
    });
    expect(Buffer.from(await file.arrayBuffer()).equals(bytes)).toBe(true);
    const events = await auditOf(lab.id);
    expect(events.at(-1)).toMatchObject({ action: 'stored', actorName: 'Ada Brook' });
    const { AuditEvent } = await import('../../../src/lib/server/db/models/audit-event');
    const stored = await AuditEvent.findOne({ where: { entityId: brought.import.id, action: 'stored' } });
    expect(stored?.after).toMatchObject({ accessKey: 'rig', values: 3 });
  });

  it('comes as a form too, and as a workbook', async () => {
    const book = new ExcelJS.Workbook();
    book.addWorksheet('Values').addRows([[...header], ...all().map((row) => [...row])]);
    const form = new FormData();
    form.set('experiment', experiment);
    form.set('file', new File([new Uint8Array(await book.xlsx.writeBuffer())], 'run 7.xlsx'));
    const response = await call({
      route: '/studies/[study]/imports',
      params: { study: study.code },
      key,
      body: form
    });
    expect(await read(response)).toMatchObject({
      status: 201,
      body: { import: { fileName: 'run 7.xlsx', valueCount: 3 } }
    });
    expect(await counting()).toEqual([40, 45, 50]);
  });

  it('changes nothing when the same bytes come again, and says when they came and by whom', async () => {
    const first = await bring(csv(all()));
    const before = await version();
    const other = await makeMember({ lab, role: 'analyst' });
    const { key: otherKey } = await makeAccessKey(other, { name: 'other rig', scopes: ['import'], days: 1 });
    const again = await bring(csv(all()), { query: { file: 'renamed.csv' }, key: otherKey });
    expect(again.status).toBe(200);
    const known = broughtFile.parse(again.body);
    expect(known.outcome).toBe('known');
    expect(known.import).toEqual(broughtFile.parse(first.body).import);
    expect(known.import.storedBy).toBe('Ada Brook');
    expect(await counting()).toHaveLength(3);
    expect(await version()).toBe(before);
  });

  it('answers the same for bytes on record when the study is frozen, and refuses new ones', async () => {
    await bring(csv(all()));
    await Study.update({ state: 'in review' }, { where: { id: study.id } });
    expect((await bring(csv(all()))).status).toBe(200);
    expect(await bring(csv(all(41)))).toMatchObject({ status: 409, body: { code: 'conflict' } });
    expect(await counting()).toEqual([40, 45, 50]);
  });

  it('is stored once, however many send it at the same moment', async () => {
    const answers = await Promise.all(Array.from({ length: 6 }, () => bring(csv(all()))));
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 200, 200, 200, 200, 201]);
    const ids = new Set(answers.map(({ body }) => broughtFile.parse(body).import.id));
    expect(ids.size).toBe(1);
    expect(await Import.count({ where: { studyId: study.id } })).toBe(1);
    expect(await counting()).toEqual([40, 45, 50]);
  });

  it('can come again after it was withdrawn', async () => {
    const first = broughtFile.parse((await bring(csv(all()))).body);
    await withdrawImport(chemist, study.code, first.import.id, 'wrong run');
    const second = await bring(csv(all()));
    expect(second.status).toBe(201);
    expect(broughtFile.parse(second.body).import.id).not.toBe(first.import.id);
  });
});

describe('what stands against a file', () => {
  it('comes by sheet and cell, all of it at once, and nothing is stored', async () => {
    const rows = [...all('4O,1'), ['S9', 'Elution', 'Alpha', 51]];
    const book = new ExcelJS.Workbook();
    book.addWorksheet('Carbon').addRows([[...header], ...rows.map((row) => [...row])]);
    const answer = await bring(new Uint8Array(await book.xlsx.writeBuffer()), { query: { file: 'a.xlsx' } });
    expect(answer).toMatchObject({ status: 422, body: { code: 'file-problems', status: 422 } });
    const { problems, importId } = answer.body as {
      problems: readonly Readonly<Record<string, unknown>>[];
      importId: string;
    };
    expect(problems).toEqual(
      expect.arrayContaining([
        expect.objectContaining({
          severity: 'error',
          path: 'Carbon!D2',
          sheet: 'Carbon',
          cell: 'D2',
          found: expect.stringContaining('4O,1'),
          expected: expect.any(String),
          fix: expect.any(String)
        }),
        expect.objectContaining({
          path: 'Carbon!A5',
          code: 'unknown-sample',
          found: expect.stringContaining('S9')
        })
      ])
    );
    expect(await counting()).toEqual([]);
    // The file itself is kept, and can be looked at.
    const detail = importDetail.parse(
      (
        await read(
          await call({
            route: '/studies/[study]/imports/[import]',
            params: { study: study.code, import: importId },
            key
          })
        )
      ).body
    );
    expect(detail.import.state).toBe('received');
    expect(detail.problems).toHaveLength(problems.length);
  });

  it('asks what it cannot know, and takes the answer with the next request', async () => {
    const noBasis = encoder.encode('Sample,Fraction,Analyte,Value\nS1,Elution,Alpha,40\n');
    const asked = await bring(noBasis);
    expect(asked.status).toBe(202);
    expect(broughtFile.parse(asked.body)).toMatchObject({
      outcome: 'received',
      questions: [{ code: 'basis-unknown', answer: 'basis' }]
    });
    expect(await counting()).toEqual([]);
    expect((await bring(noBasis, { query: { basis: 'ng' } })).status).toBe(201);
    expect(await counting()).toEqual([40]);
  });

  it('asks why values on record are covered', async () => {
    await bring(csv(all()));
    const asked = await bring(csv(all(44)));
    expect(asked.status).toBe(202);
    expect(broughtFile.parse(asked.body).questions).toMatchObject([
      { code: 'values-covered', answer: 'reason', found: expect.stringContaining('values.csv') }
    ]);
    expect(await counting()).toEqual([40, 45, 50]);
    expect((await bring(csv(all(44)), { query: { reason: 'integrated anew' } })).status).toBe(201);
    expect(await counting()).toEqual([44, 45, 50]);
  });

  it('stores a questionable value only when its very questions are confirmed', async () => {
    const bytes = csv(all(-3));
    const codesOf = (body: unknown): readonly string[] => [
      ...new Set(
        broughtFile.parse(body).questions.map(({ code, answer }) => {
          expect(answer).toBe('confirm');
          return code;
        })
      )
    ];
    const codes = codesOf((await bring(bytes)).body);
    expect(codes).toContain('negative');
    const others = codes.filter((code) => code !== 'negative');
    const partly = await bring(bytes, { query: { confirm: [...others, 'something-else'].join(',') } });
    expect(partly.status).toBe(202);
    expect(codesOf(partly.body)).toEqual(['negative']);
    expect(await counting()).toEqual([]);
    expect((await bring(bytes, { query: { confirm: codes.join(',') } })).status).toBe(201);
    expect(await counting()).toEqual([-3, 45, 50]);
  });

  it('only looks where no storing is asked for', async () => {
    const looked = await bring(csv(all()), { query: { store: 'false' } });
    expect(looked).toMatchObject({ status: 202, body: { outcome: 'received', questions: [] } });
    expect(await counting()).toEqual([]);
    expect((await bring(csv(all()))).status).toBe(201);
    const list = imports.parse(
      (await read(await call({ route: '/studies/[study]/imports', params: { study: study.code }, key }))).body
    );
    expect(list.imports).toHaveLength(1);
  });

  it.each([
    ['no name', { file: '' }, 'file'],
    ['a misspelt parameter', { decimals: 'comma' }, ''],
    ['a basis that does not exist', { basis: 'mg' }, 'basis'],
    ['an experiment that is no number', { experiment: 'one' }, 'experiment'],
    ['a column map that nobody saved', { map: 'room 12' }, 'map']
  ])('refuses %s and says which parameter', async (_what, query, path) => {
    const { status, body } = await bring(csv(all()), { query });
    expect(status).toBe(400);
    expect((body as { problems: readonly { path: string }[] }).problems[0]?.path).toBe(path);
    expect(await Import.count({ where: { studyId: study.id } })).toBe(0);
  });

  it('is read by the column map that was named, once the lab keeps one', async () => {
    const looked = broughtFile.parse((await bring(csv(all(41)), { query: { store: 'false' } })).body);
    await keepColumnMap(chemist, study.code, looked.import.id, 'Room 12');
    expect((await bring(csv(all()), { query: { map: 'room 12', mapVersion: '2' } })).status).toBe(400);
    expect((await bring(csv(all()), { query: { mapVersion: '1' } })).status).toBe(400);
    expect((await bring(csv(all()), { query: { map: 'room 12', mapVersion: '1' } })).status).toBe(201);
    expect(await counting()).toEqual([40, 45, 50]);
    const stranger = await makeMember({ role: 'chemist' });
    const elsewhere = await makeStudy(stranger);
    const own = await makeAccessKey(stranger, { name: 'rig', scopes: ['import'], days: 1 });
    const { status } = await read(
      await call({
        route: '/studies/[study]/imports',
        params: { study: elsewhere.study.code },
        query: { file: 'a.csv', map: 'room 12' },
        key: own.key,
        headers: { 'content-type': 'text/csv' },
        body: csv(all())
      })
    );
    expect(status).toBe(400);
  });

  it('leaves what a person worked out about a waiting file as it is', async () => {
    const asked = broughtFile.parse((await bring(csv(all()), { query: { store: 'false' } })).body);
    const row = await Import.findByPk(asked.import.id);
    const assignments = { S1: { kind: 'left out' } };
    await Import.update({ declared: { ...row?.declared, assignments } }, { where: { id: asked.import.id } });
    await bring(csv(all()), { query: { store: 'false', basis: 'ng' } });
    expect((await Import.findByPk(asked.import.id))?.declared).toMatchObject({ assignments, basis: 'ng' });
  });

  it('knows no experiment that the study does not have', async () => {
    expect((await bring(csv(all()), { query: { experiment: '77' } })).status).toBe(404);
  });

  it.each([
    ['application/json', '{}'],
    ['application/x-www-form-urlencoded', 'a=b'],
    ['image/png', 'x'],
    ['application/octet-stream', '%PDF-1.7 and so on'],
    ['text/csv', '<html><body>Sign in</body></html>']
  ])('turns down what is no table: %s', async (type, body) => {
    expect(await bring(body, { type })).toMatchObject({ status: 415, body: { code: 'unsupported' } });
    expect(await Import.count({ where: { studyId: study.id } })).toBe(0);
  });

  it('turns down an empty file', async () => {
    expect(await bring('')).toMatchObject({ status: 400, body: { problems: [{ path: 'file' }] } });
  });

  it('stops reading what is larger than the lab takes, whatever it says of its length', async () => {
    const piece = new Uint8Array(1024 * 1024).fill(65);
    let given = 0;
    const endless = new ReadableStream<Uint8Array>({
      pull: (controller) => {
        given += 1;
        controller.enqueue(piece);
      }
    });
    expect(await bring(endless)).toMatchObject({ status: 413, body: { code: 'too-large' } });
    expect(given).toBeLessThan(config().uploadLimitBytes / piece.length + 5);
    const said = await call({
      route: '/studies/[study]/imports',
      params: { study: study.code },
      query: { file: 'a.csv' },
      key,
      headers: { 'content-type': 'text/csv', 'content-length': String(config().uploadLimitBytes + 1) },
      body: 'x'
    });
    expect(said.status).toBe(413);
  });
});
