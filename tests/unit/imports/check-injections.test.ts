import { describe, expect, it } from 'vitest';
import { mapRecords } from '../../../src/lib/server/imports/map-records';
import { readWorkbook } from '../../../src/lib/server/imports/read-workbook';
import type { Expectation } from '../../../src/lib/server/imports/types';
import { writeTemplate } from '../../../src/lib/server/imports/write-template';
import { expectation } from '../../factories/expectation';

const withChecks = (): Expectation => {
  const plain = expectation();
  return {
    ...plain,
    experimentId: 'experiment 1',
    calibrationSets: plain.calibrationSets.map((set) => ({
      ...set,
      checks: [
        { id: 'icv', name: 'ICV', kind: 'second source' },
        { id: 'ccv', name: 'CCV', kind: 'continuing' },
        { id: 'ib', name: 'IB', kind: 'instrument blank' }
      ]
    }))
  };
};

/** @returns "check injection value" for each record of a check, and the codes of the problems that are more than a note */
async function read(lines: readonly string[]): Promise<readonly [string[], string[]]> {
  const workbook = await readWorkbook(Buffer.from(lines.join('\n')));
  const { records, problems } = mapRecords(workbook, withChecks());
  return [
    records.flatMap(({ place, injection, reported, panelEntryId }) =>
      place.kind === 'check'
        ? [`${place.checkStandardId} ${injection} ${panelEntryId.slice(6, 8)} ${reported.value}`]
        : []
    ),
    problems.filter(({ severity }) => severity === 'error').map(({ code }) => code)
  ];
}

describe('the injections of a check', () => {
  it('are told apart by their times, whatever the order of the rows', async () => {
    expect(
      await read([
        'Sample;Analyte;Area;Acquired at',
        'CCV;Caffeine;1;2026-03-04 10:00',
        'CCV;Caffeine;2;2026-03-04 14:00',
        'CCV;α-Testol;3;2026-03-04 14:00',
        'CCV;α-Testol;4;2026-03-04 10:00'
      ])
    ).toEqual([['ccv 1 Ca 1', 'ccv 2 Ca 2', 'ccv 2 α- 3', 'ccv 1 α- 4'], []]);
  });

  it('at one time are one, and a second result of it is a repetition', async () => {
    const [, problems] = await read([
      'Sample;Analyte;Area;Acquired at',
      'CCV;Caffeine;1;2026-03-04 10:00',
      'CCV;Caffeine;2;2026-03-04 10:00'
    ]);
    expect(problems).toEqual(['same injection twice']);
  });

  it('are told apart by the number that the file gives, though an analyte be missing from one', async () => {
    expect(
      await read([
        'Sample;Analyte;Area;Injection',
        'CCV;Caffeine;1;1',
        'CCV;Caffeine;2;2',
        'CCV;α-Testol;3;2'
      ])
    ).toEqual([['ccv 1 Ca 1', 'ccv 2 Ca 2', 'ccv 2 α- 3'], []]);
  });

  it('without times or numbers follow one another, a row of its own each in the wide layout', async () => {
    expect(await read(['Sample;Caffeine area;α-Testol area', 'ICV;1;2', 'CCV;3;4', 'CCV;5;6'])).toEqual([
      ['icv 1 Ca 1', 'icv 1 α- 2', 'ccv 1 Ca 3', 'ccv 1 α- 4', 'ccv 2 Ca 5', 'ccv 2 α- 6'],
      []
    ]);
  });

  it('are unclear where one analyte has fewer of them and nothing tells which', async () => {
    const [, problems] = await read([
      'Sample;Analyte;Area',
      'CCV;Caffeine;1',
      'CCV;α-Testol;2',
      'CCV;Caffeine;3'
    ]);
    expect(problems).toEqual(['check injections unclear']);
  });

  it('with a time in some rows only are read where the times agree, and refused where they do not', async () => {
    const head = 'Sample;Analyte;Area;Acquired at';
    const [records, none] = await read([
      head,
      'CCV;Caffeine;1;2026-03-04 10:00',
      'CCV;α-Testol;2;',
      'CCV;Caffeine;3;2026-03-04 14:00',
      'CCV;α-Testol;4;2026-03-04 14:00'
    ]);
    expect([records, none]).toEqual([['ccv 1 Ca 1', 'ccv 1 α- 2', 'ccv 2 Ca 3', 'ccv 2 α- 4'], []]);
    const [, problems] = await read([
      head,
      'CCV;Caffeine;1;2026-03-04 10:00',
      'CCV;α-Testol;2;2026-03-04 14:00',
      'CCV;Caffeine;3;2026-03-04 14:00',
      'CCV;α-Testol;4;'
    ]);
    expect(problems).toEqual(['check injections unclear']);
  });

  it('with nothing in their cells were not run', async () => {
    expect(await read(['Sample;Caffeine area;α-Testol area', 'CCV;;', 'CCV;5;'])).toEqual([
      ['ccv 1 Ca 5', 'ccv 1 α- null'],
      []
    ]);
  });
});

describe('the template', () => {
  it.each(['long', 'wide'] as const)(
    'has rows for the checks of its set, before and after: %s',
    async (layout) => {
      const bytes = await writeTemplate(withChecks(), 'experiment 1', layout);
      const workbook = await readWorkbook(bytes);
      const sheet = workbook.sheets[0];
      const labels = sheet?.texts.filter((text) => ['ICV', 'IB', 'CCV', 'S1', 'S2'].includes(text));
      expect([...new Set(labels)]).toEqual(['ICV', 'IB', 'CCV', 'S1', 'S2']);
      // Empty as it is, it brings the extracts as missing and no check.
      const { records } = mapRecords(workbook, withChecks());
      expect(records.filter(({ place }) => place.kind === 'check')).toEqual([]);
      expect(records.filter(({ place }) => place.kind === 'extract').length).toBe(8);
    }
  );
});
