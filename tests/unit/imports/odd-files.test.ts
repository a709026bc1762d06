import { describe, expect, it } from 'vitest';
import { mapRecords } from '../../../src/lib/server/imports/map-records';
import { readWorkbook } from '../../../src/lib/server/imports/read-workbook';
import type { Expectation, MappedRecord, Problem } from '../../../src/lib/server/imports/types';
import { bombFiles } from '../../fixtures/workbooks/odd-files/bomb-files';
import { containerFiles } from '../../fixtures/workbooks/odd-files/container-files';
import { layoutFiles } from '../../fixtures/workbooks/odd-files/layout-files';
import { offered } from '../../fixtures/workbooks/odd-files/odd-file';
import type { OddFile } from '../../fixtures/workbooks/odd-files/odd-file';
import { textFiles } from '../../fixtures/workbooks/odd-files/text-files';
import { valueFiles } from '../../fixtures/workbooks/odd-files/value-files';
import { libreOffice } from '../../fixtures/workbooks/libreoffice';

const suites: Readonly<Record<string, readonly OddFile[]>> = {
  containers: containerFiles,
  'text tables': textFiles,
  layouts: layoutFiles,
  values: valueFiles,
  'what is refused': bombFiles
};

/** All that a record says, in one line; what is not given is left out. */
function recordText(record: MappedRecord, { experiments, panel }: Expectation): string {
  const { place, reported, qualifiers } = record;
  const replicates = experiments.flatMap((each) => each.replicates);
  const fractions = experiments.flatMap((each) => each.fractions);
  const placeText =
    place.kind === 'extract'
      ? [
          replicates.find(({ id }) => id === place.replicateId)?.label,
          ...fractions.filter(({ id }) => id === place.fractionId).map(({ name }) => name)
        ].join('/')
      : place.kind === 'level'
        ? place.levelId
        : place.checkStandardId;
  const given = (called: string, value: unknown): string[] =>
    value === null || value === undefined ? [] : [`${called} ${String(value)}`];
  return [
    `${record.sheet}!${record.cell} ${placeText} ${panel.find(({ id }) => id === record.panelEntryId)?.name} ${reported.kind}`,
    record.state === 'value' ? String(reported.value) : record.state,
    ...(record.limit === null ? [] : [String(record.limit)]),
    ...(record.injection === 1 ? [] : [`#${record.injection}`]),
    ...given('IS', reported.internalArea),
    ...given('V', record.finalVolumeMl),
    ...given('DF', record.dilution),
    ...given('share', record.aliquotShare),
    ...given('at', record.acquiredAt),
    ...given('RT', qualifiers?.retentionTimeMin),
    ...given('ratio', qualifiers?.ionRatio),
    ...given('S/N', qualifiers?.signalToNoise),
    ...(qualifiers?.manualIntegration ? [`manual ${qualifiers.manualIntegration.cause ?? ''}`.trim()] : [])
  ].join(' ');
}

const problemText = ({ severity, code, sheet, cell }: Problem): string =>
  `${severity} ${code} ${sheet ?? 'file'}${cell === null ? '' : `!${cell}`}`;

describe.each(Object.entries(suites))('%s', (_, files) => {
  it.each(files.map((file) => [file.name, file] as const))(
    '%s',
    async (_name, file) => {
      if (file.needs === 'LibreOffice' && !libreOffice) return;
      const bytes = await file.make();
      if (file.refused) {
        await expect(readWorkbook(bytes)).rejects.toMatchObject({ name: 'Refusal', code: file.refused });
        return;
      }
      const expected: Expectation = { ...offered, ...file.over };
      const { records, problems } = mapRecords(await readWorkbook(bytes), expected);
      expect({
        records: records.map((record) => recordText(record, expected)),
        problems: problems.map(problemText)
      }).toEqual({ records: file.records, problems: file.problems ?? [] });
    },
    120_000
  );
});

it('is a suite of at least sixty files, each under a name of its own', () => {
  const names = Object.values(suites).flatMap((files) => files.map(({ name }) => name));
  expect(names.length).toBeGreaterThanOrEqual(60);
  expect(new Set(names).size).toBe(names.length);
});
