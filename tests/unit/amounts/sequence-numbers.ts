import type { CriterionRule } from '../../../src/lib/domain/criteria';
import { sequenceChecks } from '../../../src/lib/server/amounts/sequence-checks';
import type {
  CheckReported,
  CheckStandard,
  Sequence,
  SequenceInjection,
  SequenceInput
} from '../../../src/lib/server/amounts/sequence-types';
import type { CalibrationSet, ExperimentData, ExtractReported } from '../../../src/lib/server/amounts/types';
import { area, entry, panelOf, straightLine } from './numbers';

/*
 * Runs are written as words: "L" a level, "S" the second source, "C127" a continuing check that reads analyte a at 127 % (b at 100 %),
 * "B" a clean blank, "B80" one that holds a at 80 % of the lowest level, "E" an extract. The line is 100 area units per ng/mL from 10 to 100 ng/mL
 * (numbers.ts), checks are made to 50 ng/mL: an area of 6350 reads 63.5 ng/mL, 127 %.
 */

export const hour = 3_600_000;
const day = Date.parse('2026-03-04T08:00:00Z');

export const rule = (
  type: CriterionRule['type'],
  low: number | null,
  high: number | null
): CriterionRule => ({
  type,
  low,
  high,
  unit: '%',
  citation: `the document on ${type}`,
  year: 2018,
  standing: 'seen',
  note: null
});

/** 8000D and 8270E: within 20 %; second source 70 to 130 %; at most 20 % of the analytes; areas 50 to 200 %. */
export const usualRules = [
  rule('second-source check', 70, 130),
  rule('continuing check', 80, 120),
  rule('analytes failing a check', null, 50),
  rule('internal standard area', 50, 200)
];

export interface MadeRun {
  /** Of the sequence; the default is one for each run. */
  readonly words: string;
  /** null: no times. */
  readonly startsAt?: number | null;
  readonly setId?: string;
  readonly instrument?: string;
  readonly experimentId?: string;
}

export interface Made {
  readonly input: SequenceInput;
  readonly checks: ReturnType<typeof sequenceChecks>;
  /** Flags of analyte a, by the extracts in order of their making: true where there is one. */
  readonly flagged: (entryId?: string) => boolean[];
}

const set = (id: string): CalibrationSet => {
  const line = straightLine(['a', 'b']);
  return {
    ...line,
    id,
    name: `Set ${id}`,
    levels: line.levels.map((level) => ({ ...level, id: `${id} ${level.id}` })),
    reported: []
  };
};

const checkStandard = (
  calibrationSetId: string,
  kind: CheckStandard['kind'],
  label: string
): CheckStandard => ({
  id: `${calibrationSetId} ${label}`,
  calibrationSetId,
  kind,
  label,
  source: '',
  note: '',
  concentrations: new Map(
    kind === 'instrument blank'
      ? []
      : [
          ['a', 50],
          ['b', 50]
        ]
  )
});

const experiment = (
  id: string,
  calibrationSetId: string,
  reported: readonly ExtractReported[]
): ExperimentData => ({
  id,
  number: 1,
  title: id,
  stageKind: 'loss',
  subtract: 'none',
  calibrationSetId,
  fractions: [],
  replicates: [],
  spikes: [],
  replicateSpikes: [],
  additions: [],
  exclusions: [],
  reported
});

/** Several runs of one study, as words. Every import brings one run. */
export function makeRuns(runs: readonly MadeRun[], rules: readonly CriterionRule[] = usualRules): Made {
  const setIds = [...new Set(runs.map(({ setId = 'one' }) => setId))];
  const levels = new Map<string, CalibrationSet['reported'][number][]>();
  const extracts = new Map<string, { setId: string; reported: ExtractReported[] }>();
  const checkReported: CheckReported[] = [];
  const sequences: Sequence[] = [];
  const injections: SequenceInjection[] = [];
  const extractIds: string[] = [];

  runs.forEach((run, index) => {
    const {
      words,
      startsAt = day + index * 100 * hour,
      setId = 'one',
      experimentId = `experiment ${setId}`
    } = run;
    const sequenceId = `sequence ${index + 1}`;
    sequences.push({
      id: sequenceId,
      importId: `import ${index + 1}`,
      instrument: run.instrument ?? 'Instrument 1',
      runOn: null
    });
    words.split(' ').forEach((word, at) => {
      const id = `${index + 1}.${at + 1}`;
      const [, letter = '', figure] = /^([A-Z])(\d+)?$/.exec(word) ?? [];
      const common = { importId: `import ${index + 1}`, injectionId: id };
      const numbers = (first: number, second: number) =>
        (['a', 'b'] as const).map((entryId, which) =>
          area(entryId, 'r', null, which === 0 ? first : second, common)
        );
      const made = (subject: SequenceInjection['subject']): void => {
        injections.push({
          id,
          sequenceId,
          position: at + 1,
          number: 1,
          dilution: 1,
          runAt: startsAt === null ? null : startsAt + at * hour,
          subject
        });
      };
      const standard = (label: string): string => `${setId} ${label}`;
      if (letter === 'L') {
        const level = `${setId} level-${(at % 4) + 1}`;
        made({ kind: 'level', calibrationSetId: setId, levelId: level });
        const concentration = [10, 20, 50, 100][at % 4] ?? 0;
        const own = levels.get(setId) ?? [];
        levels.set(setId, own);
        for (const row of numbers(100 * concentration, 100 * concentration))
          own.push({ ...row, levelId: level });
      } else if (letter === 'E') {
        made({
          kind: 'extract',
          experimentId,
          replicateId: `r${id}`,
          fractionId: null,
          finalVolumeMl: 1
        });
        extractIds.push(id);
        const own = extracts.get(experimentId) ?? { setId, reported: [] };
        extracts.set(experimentId, own);
        own.reported.push(...numbers(3000, 3000));
      } else {
        const label = { S: 'ICV', C: 'CCV', B: 'IB' }[letter] ?? '';
        made({ kind: letter === 'B' ? 'blank' : 'check', checkStandardId: standard(label) });
        const first = letter === 'B' ? Number(figure ?? 0) * 10 : Number(figure ?? 100) * 50;
        for (const row of numbers(first, letter === 'B' ? 0 : 5000))
          checkReported.push({ ...row, checkStandardId: standard(label) });
      }
    });
  });

  // A set whose levels no run brought was calibrated at another time, which no sequence of the study shows.
  const sets = setIds.map((id): CalibrationSet => {
    const made = set(id);
    const own = levels.get(id);
    const elsewhere = straightLine(['a', 'b']).reported.map((row) => ({
      ...row,
      levelId: `${id} ${row.levelId}`,
      injectionId: `${id} elsewhere ${row.levelId}`
    }));
    return { ...made, reported: own && own.length >= 8 ? own : [...(own ?? []), ...elsewhere] };
  });
  const input: SequenceInput = {
    panel: panelOf(entry({ id: 'a' }), entry({ id: 'b' })),
    sets,
    experiments: [...extracts].map(([id, { setId, reported }]) => experiment(id, setId, reported)),
    checkStandards: setIds.flatMap((id) => [
      checkStandard(id, 'second source', 'ICV'),
      checkStandard(id, 'continuing', 'CCV'),
      checkStandard(id, 'instrument blank', 'IB')
    ]),
    checkReported,
    sequences,
    injections,
    rules
  };
  const checks = sequenceChecks(input);
  return {
    input,
    checks,
    flagged: (entryId = 'a') => extractIds.map((id) => checks.flagsOf(id, entryId).length > 0)
  };
}
