import { createHash } from 'node:crypto';
import { percentText } from '../../domain/figure-text';
import type { MovedFigureView, MovedLossView, MovesView, RangeMoveView } from '../../views/calibration';
import { calibrate } from '../amounts/calibration';
import { checkCalibration } from '../amounts/calibration-check';
import type { CalibrationSet } from '../amounts/types';
import { rangeMoves } from './calibration-range-moves';
import { fittedEntries, namesIn, setOf } from './calibration-fits';
import { counted, listed } from './changes';
import { addressText, type FigureAddress } from './figures/addresses';
import type { StudyCalibrationSet, StudyExperiment, StudyPanelEntry } from './figures/study-data';
import { studyFigures, type EntryFigures, type StudyFigures } from './figures/study-figures';

/** Figures that differ by less than this, in points of percent, differ by nothing but the arithmetic of the machine. */
const nothing = 1e-7;

/**
 * What a study's figures would be with another calibration set in place of the stored one, beside what they are. Nothing is stored:
 * both sides are formed in memory by the same code that forms the figures themselves.
 *
 * @param proposal what is proposed, as plain data; the token stands for it and for the data that were looked at
 */
export function movesOf(figures: StudyFigures, proposed: StudyCalibrationSet, proposal: unknown): MovesView {
  const { data } = figures;
  const after = studyFigures({
    ...data,
    calibrationSets: data.calibrationSets.map((set) => (set.id === proposed.id ? proposed : set))
  });
  const users = data.experiments.filter(({ calibrationSetId }) => calibrationSetId === proposed.id);
  const compared = users.flatMap((experiment) => comparedIn(figures, after, experiment));
  const moved = compared.filter(isMoved).sort(bySize);
  const verdictChanges = moved.filter(({ verdicts: [before, now] }) => before !== now).length;
  const range = users.flatMap((experiment) => rangeMoves(figures, after, experiment));
  const standings = standingsOf(figures, proposed);
  return {
    token: tokenOf(data.dataVersion, proposed.id, proposal),
    sentence: sentenceOf(moved, compared.length, range, users.length),
    moved,
    unmoved: compared.length - moved.length,
    verdictChanges,
    range,
    losses: movedLosses(figures, after),
    standings
  };
}

/** Stands for a proposal together with the version of the data it was held against. */
export function tokenOf(dataVersion: number | string, setId: string, proposal: unknown): string {
  return createHash('sha256')
    .update(JSON.stringify([String(dataVersion), setId, proposal]))
    .digest('hex')
    .slice(0, 32);
}

interface Side {
  readonly mean: number | null;
  readonly n: number | null;
  readonly verdict: string | null;
  readonly note: string | null;
}

function comparedIn(
  before: StudyFigures,
  after: StudyFigures,
  experiment: StudyExperiment
): MovedFigureView[] {
  const rows = before.targets.flatMap((entry) => {
    const now = before.entry(experiment.id, entry.id);
    const then = after.entry(experiment.id, entry.id);
    if (!now.ready && now.kind === 'not spiked') return [];
    const relative = isRelative(now) || isRelative(then);
    return [
      row(
        before,
        experiment,
        entry,
        relative ? 'relative recovery' : 'method recovery',
        targetSide(now),
        targetSide(then)
      )
    ];
  });
  const surrogates = before.surrogates.flatMap((entry) => {
    const now = surrogateSide(before, experiment, entry);
    const then = surrogateSide(after, experiment, entry);
    return now.n === null && then.n === null
      ? []
      : [row(before, experiment, entry, 'surrogate recovery', now, then)];
  });
  return [...rows, ...surrogates].filter(({ before: now, after: then }) => now !== null || then !== null);
}

const isRelative = (found: EntryFigures): boolean => !found.ready && found.relative?.available === true;

function targetSide(found: EntryFigures): Side {
  if (!found.ready) {
    const relative = found.relative?.available ? found.relative : null;
    return relative
      ? {
          mean: relative.estimate.estimate ?? relative.description.mean,
          n: relative.description.n,
          verdict: null,
          note: null
        }
      : { mean: null, n: null, verdict: null, note: found.reason };
  }
  const { method } = found.balance;
  return {
    mean: method?.mean ?? null,
    n: method?.n ?? null,
    verdict: found.verdict,
    note: found.reasons.join('; ') || null
  };
}

function surrogateSide(figures: StudyFigures, experiment: StudyExperiment, entry: StudyPanelEntry): Side {
  const { description, portions, refusal } = figures.surrogate(experiment.id, entry.id);
  const outside = portions.filter(({ holds }) => holds === false).length;
  return {
    mean: description?.mean ?? null,
    n: description?.n ?? null,
    verdict: portions.some(({ holds }) => holds !== null)
      ? outside === 0
        ? 'inside'
        : `${counted(outside, 'portion')} outside`
      : null,
    note: refusal
  };
}

function row(
  figures: StudyFigures,
  experiment: StudyExperiment,
  entry: StudyPanelEntry,
  what: MovedFigureView['what'],
  before: Side,
  after: Side
): MovedFigureView {
  const kinds = {
    'method recovery': 'recovery',
    'surrogate recovery': 'surrogate',
    'relative recovery': 'relative'
  } as const;
  const address: FigureAddress = { kind: kinds[what], experiment: experiment.number, entry: entry.id };
  return {
    experiment: experiment.number,
    experimentTitle: experiment.title,
    name: entry.name,
    what,
    before: before.mean,
    after: after.mean,
    points: before.mean === null || after.mean === null ? null : after.mean - before.mean,
    n: [before.n, after.n],
    verdicts: [before.verdict, after.verdict],
    note: after.mean === null || after.verdict !== before.verdict ? after.note : null,
    href: `/studies/${figures.data.code}/balance?experiment=${experiment.number}&figure=${addressText(address)}`
  };
}

function isMoved({ points, n, verdicts, before, after }: MovedFigureView): boolean {
  if ((before === null) !== (after === null)) return true;
  return n[0] !== n[1] || verdicts[0] !== verdicts[1] || Math.abs(points ?? 0) > nothing;
}

/** Verdicts that change first, then figures that go or come, then the largest moves. */
function bySize(a: MovedFigureView, b: MovedFigureView): number {
  const weight = ({ verdicts, points }: MovedFigureView): number =>
    (verdicts[0] !== verdicts[1] ? 2e6 : 0) + (points === null ? 1e6 : Math.abs(points));
  return weight(b) - weight(a);
}

/** What the stages of each variant take, where that moves: it follows from the recoveries, and is named by rules of its own. */
function movedLosses(before: StudyFigures, after: StudyFigures): MovedLossView[] {
  return before.data.variants
    .flatMap((variant) => {
      const now = before.variant(variant);
      const then = after.variant(variant).figures.entries;
      return [...now.figures.entries.values()].flatMap(({ entry, rows }) => {
        const others = new Map((then.get(entry.id)?.rows ?? []).map((item) => [item.stage, item]));
        return rows.flatMap((item): MovedLossView[] => {
          const other = others.get(item.stage);
          const [left, right] = [item.lost?.estimate ?? null, other?.lost?.estimate ?? null];
          const named = [item.named, other?.named ?? false] as const;
          const isSame = (left === null) === (right === null) && named[0] === named[1];
          if (isSame && Math.abs((right ?? 0) - (left ?? 0)) < 0.1) return [];
          const stage = before.data.stages.find(({ key }) => key === item.stage)?.name ?? item.stage;
          return [{ variant: variant.code, stage, name: entry.name, before: left, after: right, named }];
        });
      });
    })
    .sort((a, b) => lossWeight(b) - lossWeight(a));
}

const lossWeight = ({ before, after, named }: MovedLossView): number =>
  (named[0] !== named[1] ? 1e6 : 0) + (before === null || after === null ? 1e5 : Math.abs(after - before));

/** Lines whose standing against the rules would be another. */
function standingsOf(figures: StudyFigures, proposed: CalibrationSet): MovesView['standings'] {
  const stored = setOf(figures.data, proposed.id);
  const nameOf = namesIn(figures.data);
  const { rules } = figures.data.criteriaSet;
  const standing = (set: CalibrationSet, entry: StudyPanelEntry): string => {
    const line = calibrate(set, entry, nameOf);
    if (!line.usable) return 'no line';
    const checks = checkCalibration(line, rules);
    const broken = checks.filter(({ holds }) => !holds);
    if (broken.length > 0) return `outside: ${listed(broken.map(({ detail }) => detail))}`;
    return checks.length > 0 ? 'inside' : 'no rule';
  };
  const entries = new Map(
    [...fittedEntries(figures.data, stored), ...fittedEntries(figures.data, proposed)].map((entry) => [
      entry.id,
      entry
    ])
  );
  return [...entries.values()].flatMap((entry) => {
    const [before, after] = [standing(stored, entry), standing(proposed, entry)];
    return before === after ? [] : [{ name: entry.name, before, after }];
  });
}

function sentenceOf(
  moved: readonly MovedFigureView[],
  compared: number,
  range: readonly RangeMoveView[],
  users: number
): string {
  if (users === 0) return 'No experiment uses this set yet, so no figure moves.';
  if (compared === 0) return 'No figure rests on this set yet, so none moves.';
  const worse = new Set(range.flatMap((item) => (item.worse ? [item.name] : []))).size;
  const outside = worse === 0 ? '' : ` Readings of ${counted(worse, 'analyte')} would leave the range.`;
  if (moved.length === 0) {
    return `None of the ${counted(compared, 'figure')} that rest on this set moves.${outside}`;
  }
  const sizes = moved.flatMap(({ points }) => (points === null ? [] : [Math.abs(points)]));
  const largest = Math.max(0, ...sizes);
  const by = largest < 0.05 ? 'by less than 0.1 points' : `by up to ${percentText(largest)} points`;
  const gone = moved.filter(({ before, after }) => before !== null && after === null).length;
  const of = `${moved.length} of ${counted(compared, 'figure')}`;
  const start =
    gone === 0
      ? `${of} move${moved.length === 1 ? 's' : ''}${sizes.length === 0 ? '' : `, ${by}`}.`
      : `Of ${counted(compared, 'figure')} ${gone} would be lost${sizes.length === 0 ? '' : `, and ${sizes.length} move${sizes.length === 1 ? 's' : ''} ${by}`}.`;
  const verdicts = moved.filter(({ verdicts: [before, after] }) => before !== after);
  const changed =
    verdicts.length === 0
      ? 'No verdict changes.'
      : `${listed(
          verdicts.map(
            ({ name, experiment, verdicts: [before, after] }) =>
              `${name} in experiment ${experiment} goes from ${before ?? 'no verdict'} to ${after ?? 'no verdict'}`
          ),
          4
        )}.`;
  return `${start} ${changed}${outside}`;
}
