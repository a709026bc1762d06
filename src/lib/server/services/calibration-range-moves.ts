import type { RangeMoveView } from '../../views/calibration';
import { injectionsRead, type ReadInjection } from './calibration-readings';
import { counted } from './changes';
import type { StudyExperiment } from './figures/study-data';
import type { StudyFigures } from './figures/study-figures';

const sideTexts: readonly {
  readonly from: (side: ReadInjection['side'] | undefined) => boolean;
  readonly to: ReadInjection['side'];
  readonly text: (count: number) => string;
  readonly worse: boolean;
}[] = [
  {
    from: (side) => side !== 'above',
    to: 'above',
    text: (count) => `${counted(count, 'reading')} would lie above the highest level and give no amount`,
    worse: true
  },
  {
    from: (side) => side !== 'unreadable',
    to: 'unreadable',
    text: (count) => `${counted(count, 'reading')} would give no amount`,
    worse: true
  },
  {
    from: (side) => side === 'inside',
    to: 'below',
    text: (count) => `${counted(count, 'reading')} would lie below the lowest level`,
    worse: true
  },
  {
    from: (side) => side !== 'inside',
    to: 'inside',
    text: (count) => `${counted(count, 'reading')} would come into the range`,
    worse: false
  },
  {
    from: (side) => side === 'above' || side === 'unreadable',
    to: 'below',
    text: (count) => `${counted(count, 'reading')} would give an amount, below the lowest level`,
    worse: false
  }
];

/** Readings of an experiment that lie on another side of the range of their line afterwards. */
export function rangeMoves(
  before: StudyFigures,
  after: StudyFigures,
  experiment: StudyExperiment
): RangeMoveView[] {
  const held = new Set(experiment.reported.map(({ entryId }) => entryId));
  return before.data.panel
    .filter(({ id }) => held.has(id))
    .flatMap((entry) => {
      const sides = new Map(
        injectionsRead(before.amounts(experiment.id), entry.id).map(({ id, side }) => [id, side])
      );
      const now = injectionsRead(after.amounts(experiment.id), entry.id);
      return sideTexts.flatMap(({ from, to, text, worse }) => {
        const count = now.filter(({ id, side }) => side === to && from(sides.get(id))).length;
        return count === 0
          ? []
          : [{ experiment: experiment.number, name: entry.name, text: text(count), worse }];
      });
    });
}
