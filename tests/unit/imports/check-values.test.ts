import { describe, expect, it } from 'vitest';
import { mapRecords } from '../../../src/lib/server/imports/map-records';
import type {
  Expectation,
  ExperimentExpectation,
  Problem,
  ReplicateExpectation
} from '../../../src/lib/server/imports/types';
import {
  experimentExpectation,
  expectation,
  panelExpectation,
  replicateExpectation
} from '../../factories/expectation';
import { asRead, rows } from '../../fixtures/workbooks/as-read';

/** Four spiked replicates with two fractions and a final volume on record. */
function offered(
  over: Partial<Expectation> = {},
  ofEach: Partial<ReplicateExpectation> = {},
  ofAll: Partial<ExperimentExpectation> = {}
): Expectation {
  return expectation({
    experiments: [
      experimentExpectation({
        replicates: ['S1', 'S2', 'S3', 'S4'].map((label) =>
          replicateExpectation(label, { finalVolumeMl: 1, ...ofEach })
        ),
        ...ofAll
      })
    ],
    ...over
  });
}

function problems(text: string, over?: Expectation): readonly Problem[] {
  return mapRecords(asRead({ A: rows(text) }), over ?? offered()).problems;
}

const codes = (text: string, over?: Expectation): readonly string[] =>
  problems(text, over).map(({ severity, code, cell }) => `${severity} ${code} ${cell}`);

/** Amounts of Caffeine in Elution 1, one for each of S1, S2, … */
const amounts = (unit: string, values: readonly (number | string)[]): string =>
  [
    `Sample|Fraction|Analyte|${unit}`,
    ...values.map((value, index) => `S${index + 1}|Elution 1|Caffeine|${value}`)
  ].join('\n');

const standard = panelExpectation('Testol-d5', { role: 'injection internal standard' });
const corrected = (point: 'vial' | 'extract'): Partial<Expectation> => ({
  panel: [panelExpectation('Caffeine', { internalStandard: { panelEntryId: standard.id, point } }), standard]
});

describe('results outside of what was calibrated are asked about', () => {
  const withLevels = offered({
    panel: [panelExpectation('Caffeine', { levelRange: { low: 1, high: 500 } })]
  });

  it('by the levels of the study where they are contents of the vial, once above and once below', () => {
    const found = problems(amounts('ng/mL in the vial', [501, 900, 0.5, 500]), withLevels).filter(
      ({ code }) => code === 'outside calibration range'
    );
    expect(found.map(({ severity, cell }) => [severity, cell])).toEqual([
      ['question', 'D2'],
      ['question', 'D4']
    ]);
    expect(found[0]?.message).toMatch(
      /above its highest calibration level.* 501, the level’s 500 ng\/mL.*1 more cell/
    );
    expect(found[1]?.message).toMatch(/below its lowest/);
  });

  it('by the areas of the levels in the file, as ratios where a standard corrects them', () => {
    const table = (area: number, internal: string): string =>
      [
        `Sample|Fraction|Analyte|Area${internal === '' ? '' : '|IS area'}`,
        `Level 1||Caffeine|100${internal}`,
        `Level 2||Caffeine|1000${internal}`,
        `S1|Elution 1|Caffeine|${area}${internal}`
      ].join('\n');
    expect(codes(table(1001, ''))).toEqual(['question outside calibration range D4']);
    expect(codes(table(99, ''))).toEqual(['question outside calibration range D4']);
    expect(codes(table(1000, ''))).toEqual([]);
    // 900 over 50 is a ratio of 18; the highest level has 1000 over 100, which is 10.
    const ratios = table(900, '|100').replace(/\|100$/, '|50');
    expect(codes(ratios, offered(corrected('vial')))).toEqual(['question outside calibration range D4']);
  });

  it('but not limits, amounts of a whole fraction, nor where no level is known', () => {
    expect(codes(amounts('ng/mL in the vial', ['>500', '<0.5', 'ND']), withLevels)).toEqual([]);
    expect(codes(amounts('ng', [501, 502]), withLevels)).toEqual([]);
    expect(codes(amounts('ng/mL in the vial', [501, 502]))).toEqual([]);
  });
});

describe('an internal standard far from the area it has elsewhere is asked about', () => {
  const table = (areas: readonly number[], volumes: readonly number[] = []): string =>
    [
      'Sample|Fraction|Analyte|Area|IS area|Final volume (mL)',
      ...areas.map(
        (area, index) =>
          `S${1 + Math.floor(index / 2)}|${index % 2 === 0 ? 'Elution 1' : 'Aqueous layer'}|Caffeine|${area / 10}|${area}|${volumes[index] ?? 1}`
      )
    ].join('\n');

  it('beyond half and twice the median of the file', () => {
    const found = problems(table([100, 101, 99, 100, 49, 201, 50.5]), offered(corrected('vial'))).filter(
      ({ code }) => code === 'internal standard outside window'
    );
    expect(found.map(({ cell, severity }) => [cell, severity])).toEqual([
      ['E6', 'question'],
      ['E7', 'question']
    ]);
    expect(found[0]?.message).toMatch(
      /Testol-d5 in injection 1 of S3, Elution 1 is 49, 49 % of what is usual/
    );
  });

  it('by the area it usually has where that is known', () => {
    const panel = corrected('vial').panel?.map((entry) =>
      entry.id === standard.id ? { ...entry, typicalArea: 1000 } : entry
    );
    const known = offered(panel ? { panel } : {});
    expect(codes(table([400, 700]), known)).toEqual(['question internal standard outside window E2']);
  });

  it('in proportion to the volume where it is added to the whole extract', () => {
    const areas = [100, 100, 100, 50, 25, 100];
    const volumes = [1, 1, 1, 2, 4, 1];
    expect(codes(table(areas, volumes), offered(corrected('extract')))).toEqual([]);
    expect(codes(table(areas, [1, 1, 1, 2, 1, 1]), offered(corrected('extract')))).toEqual([
      'question internal standard outside window E6'
    ]);
  });

  it('but not of a few injections, of which nobody can say what is usual', () => {
    expect(codes(table([100, 20]), offered(corrected('vial')))).toEqual([]);
  });
});

describe('a replicate far from its fellows is asked about', () => {
  it('where these agree with each other', () => {
    expect(codes(amounts('ng', [50, 52, 49, 110]))).toEqual(['question far from its fellows D5']);
    expect(codes(amounts('ng', [50, 52, 49, 20]))).toEqual(['question far from its fellows D5']);
    expect(codes(amounts('ng', [50, 52, 49, 90]))).toEqual([]);
    expect(codes(amounts('ng', [20, 52, 90, 300]))).toEqual([]);
    expect(codes(amounts('ng', [50, 110]))).toEqual([]);
  });

  it('with other words where it is about ten times off', () => {
    const [question] = problems(amounts('ng', [50, 52, 49, 501]));
    expect(question).toMatchObject({
      severity: 'question',
      code: 'ten times off',
      cell: 'D5',
      found: '“501”'
    });
    expect(question?.message).toMatch(/10 times the median of its 3 fellows.*dilution/);
    expect(codes(amounts('ng', [50, 52, 49, 5.1]))).toEqual(['question ten times off D5']);
  });

  it('once for all analytes of a place, and not for the little that scatters', () => {
    const text = ['Sample|Fraction|Caffeine (ng)|α-Testol (ng)']
      .concat(['50|60', '51|61', '49|59', '500|610'].map((pair, index) => `S${index + 1}|Elution 1|${pair}`))
      .join('\n');
    const [first, ...more] = problems(text);
    expect(first?.message).toMatch(/1 more cell/);
    expect(more).toEqual([]);
    const little = ['0.1', '0.11', '0.1', '0.9'].map(
      (value, index) => `S${index + 1}|Aqueous layer|Caffeine|${value}`
    );
    expect(codes([amounts('ng', [50, 52, 49, 51]), ...little].join('\n'))).toEqual([]);
  });

  it('with dilution and volume taken into account', () => {
    const text = (dilution: number): string =>
      ['Sample|Fraction|Analyte|ng/mL in the vial|Dilution']
        .concat(
          ['50|1', '52|1', '49|1', `5|${dilution}`].map(
            (pair, index) => `S${index + 1}|Elution 1|Caffeine|${pair}`
          )
        )
        .join('\n');
    expect(codes(text(10))).toEqual([]);
    expect(codes(text(1))).toEqual(['question ten times off D5']);
  });

  it('and one that holds many times what was added, in any unit that tells', () => {
    const spiked = offered({}, { sampleVolumeMl: 500 }, { spikesNg: { spiked: { 'entry Caffeine': 100 } } });
    expect(codes(amounts('ng', [1000, 1001]), spiked)).toEqual([
      'question ten times off D2',
      'question ten times off D3'
    ]);
    expect(codes(amounts('ng', [100, 120]), spiked)).toEqual([]);
    // 2000 ng/L in half a litre are 1000 ng.
    expect(codes(amounts('ng/L', [2000]), spiked)).toEqual(['question ten times off D2']);
    expect(codes(amounts('ng/mL in the vial', [1000]), spiked)).toEqual(['question ten times off D2']);
    const own = offered(
      {},
      { spikesNg: { 'entry Caffeine': 1000 } },
      { spikesNg: { spiked: { 'entry Caffeine': 100 } } }
    );
    expect(codes(amounts('ng', [1000]), own)).toEqual([]);
  });
});

describe('what a file lacks or says otherwise than the record is asked about', () => {
  it('a fraction that the other replicates have', () => {
    const text = ['S1', 'S2', 'S3', 'S4']
      .flatMap((sample) =>
        ['Elution 1', 'Aqueous layer']
          .filter((fraction) => sample !== 'S3' || fraction === 'Elution 1')
          .map((fraction) => `${sample}|${fraction}|Caffeine|5`)
      )
      .join('\n');
    const [question, ...more] = problems(`Sample|Fraction|Analyte|ng\n${text}`);
    expect(question).toMatchObject({
      code: 'fraction missing in file',
      found: 'S3 without Aqueous layer',
      cell: 'D6'
    });
    expect(more).toEqual([]);
  });

  it('a surrogate, in one place or everywhere', () => {
    const panel = [panelExpectation('Caffeine'), panelExpectation('Surrogol', { role: 'surrogate' })];
    const text = (cells: readonly string[]): string =>
      ['Sample|Fraction|Caffeine (ng)|Surrogol (ng)']
        .concat(cells.map((cell, index) => `S${index + 1}|Elution 1|5|${cell}`))
        .join('\n');
    expect(codes(text(['4', '4', '', '4']), offered({ panel }))).toEqual(['question surrogate missing C4']);
    expect(codes(text(['4', '4', 'ND', '4']), offered({ panel }))).not.toContain(
      'question surrogate missing C4'
    );
    const [nowhere] = problems(amounts('ng', [5, 5]), offered({ panel }));
    expect(nowhere).toMatchObject({ code: 'surrogate missing', found: 'none in this file' });
  });

  it('no surrogate of portions that did not receive it', () => {
    const panel = [panelExpectation('Caffeine'), panelExpectation('Surrogol', { role: 'surrogate' })];
    const withSpikes = (spiked: Readonly<Record<string, number>>) =>
      offered({ panel, experiments: [experimentExpectation({ spikesNg: { spiked } })] });
    expect(codes(amounts('ng', [5, 5]), withSpikes({ 'entry Caffeine': 5 }))).toEqual([]);
    expect(codes(amounts('ng', [5, 5]), withSpikes({ 'entry Caffeine': 5, 'entry Surrogol': 4 }))).toEqual([
      'question surrogate missing D2'
    ]);
  });

  it('a sample volume that is another on record', () => {
    const text =
      'Sample|Fraction|Analyte|ng|Sample volume (mL)\nS1|Elution 1|Caffeine|5|500\nS2|Elution 1|Caffeine|5|500.5';
    expect(codes(text, offered({}, { sampleVolumeMl: 500 }))).toEqual([]);
    expect(codes(text, offered({}, { sampleVolumeMl: 0.5 }))).toEqual([
      'question differs from record D2',
      'question differs from record D3'
    ]);
    expect(codes(text)).toEqual([]);
  });

  it('times that are too late or in the wrong order', () => {
    const text = (time: string): string =>
      `Sample|Fraction|Analyte|ng|Acquired at\nS1|Elution 1|Caffeine|5|${time}`;
    const known = offered(
      {},
      { collectedAt: '2026-03-01T08:00:00.000Z', extractedAt: '2026-03-05T08:00:00.000Z' },
      { holdingDays: { collectionToExtraction: 7, extractionToAnalysis: 30 } }
    );
    expect(codes(text('2026-04-03 08:00'), known)).toEqual([]);
    expect(problems(text('2026-04-06 08:00'), known)).toMatchObject([
      { code: 'holding time passed', found: '32 days', expected: 'at most 30 days' }
    ]);
    expect(problems(text('2026-03-02 08:00'), known)[0]?.message).toMatch(
      /on 2026-03-02, before it was extracted on 2026-03-05/
    );
    const late = offered(
      {},
      { collectedAt: '2026-03-01T08:00:00.000Z', extractedAt: '2026-03-12T08:00:00.000Z' },
      { holdingDays: { collectionToExtraction: 7, extractionToAnalysis: null } }
    );
    expect(problems(text('2026-03-20 08:00'), late)[0]?.message).toMatch(
      /extracted 11 days after its collection; 7 are allowed/
    );
  });
});
