import type { LevelsProposal } from '../../schemas/calibration';
import type { CalibrationLevel as LevelData } from '../amounts/types';
import { Invalid, NotFound, type Problem } from '../errors';
import { namesIn } from './calibration-fits';
import type { LevelCells } from './calibration-level-history';
import { leavingOutProblem } from './calibration-levels';
import { counted, listed } from './changes';
import type { StudyCalibrationSet, StudyData } from './figures/study-data';

/** What stands in the way of taking a level out, or of a name for one. */
export interface Taken {
  /** Injections that stored files brought of each level, those of withdrawn and covered imports too. */
  readonly injections: ReadonlyMap<string, number>;
  /** A file could not tell a level from a check of the same name. */
  readonly checkLabels: ReadonlySet<string>;
}

/** A level as it is proposed; `key` is its id, or a made-up one where it is new. */
interface ProposedLevel {
  readonly key: string;
  readonly isNew: boolean;
  readonly label: string;
  readonly concentrations: ReadonlyMap<string, number>;
}

export interface LevelChange {
  readonly levels: readonly ProposedLevel[];
  readonly removed: readonly LevelData[];
  readonly before: LevelCells;
  readonly after: LevelCells;
}

/**
 * What a form makes of the levels of a set.
 * @throws NotFound for a level or an analyte that is not there, Invalid with a problem at each field
 */
export function changeOf(
  data: StudyData,
  set: StudyCalibrationSet,
  form: LevelsProposal,
  taken: Taken
): LevelChange {
  const problems: Problem[] = [];
  const stored = new Map(set.levels.map((level) => [level.id, level]));
  const nameOf = namesIn(data);
  const panel = new Set(data.panel.map(({ id }) => id));
  const levels: ProposedLevel[] = [];
  const removed: LevelData[] = [];
  const labels = new Set<string>();
  for (const [index, row] of form.levels.entries()) {
    const old = row.id === null ? null : stored.get(row.id);
    if (old === undefined) throw new NotFound();
    if (Object.keys(row.cells).some((id) => !panel.has(id))) throw new NotFound();
    const at = (path: string, message: string) => problems.push({ path: `levels.${index}.${path}`, message });
    if (row.remove && old) {
      const count = taken.injections.get(old.id) ?? 0;
      if (count > 0) {
        at(
          'label',
          `${old.label} holds ${counted(count, 'injection')} of stored files, so it stays. A line can go without it at an end of the range, with a cause.`
        );
      }
      removed.push(old);
      continue;
    }
    if (row.label === '') at('label', 'Name the level as the instrument does, such as L1.');
    else if (labels.has(row.label)) at('label', `There are two levels called ${row.label}.`);
    if (taken.checkLabels.has(row.label)) at('label', `A check of this set is called ${row.label}.`);
    labels.add(row.label);
    const concentrations = new Map(
      Object.entries(row.cells).flatMap(([id, value]) => (value ? [[id, value] as const] : []))
    );
    // What no field was sent for stays as it is.
    for (const [id, value] of old?.concentrations ?? []) {
      if (!(id in row.cells)) concentrations.set(id, value);
      else if (!concentrations.has(id) && hasData(set, old?.id ?? '', id)) {
        at(
          `cells.${id}`,
          `${row.label || 'This level'} has a stored area of ${nameOf(id)}, so its concentration can be corrected, not taken away.`
        );
      }
    }
    if (concentrations.size === 0) at('label', 'Give what this level holds of one analyte at least.');
    levels.push({ key: old?.id ?? `new ${index}`, isNew: old === null, label: row.label, concentrations });
  }
  for (const level of set.levels) {
    if (!form.levels.some(({ id }) => id === level.id)) levels.push(asProposed(level));
  }
  if (levels.length === 0) problems.push({ path: 'levels', message: 'A set needs at least one level.' });
  problems.push(...innerProblems(data, set, levels));
  if (problems.length > 0) throw new Invalid(problems);
  return { levels, removed, ...cellsThatDiffer(set, levels, removed, nameOf) };
}

const asProposed = (level: LevelData): ProposedLevel => ({
  key: level.id,
  isNew: false,
  label: level.label,
  concentrations: level.concentrations
});

/** True where a stored area of an analyte, or one divided by its area, needs what the level holds of it. */
function hasData(set: StudyCalibrationSet, levelId: string, entryId: string): boolean {
  return set.reported.some(
    (item) => item.levelId === levelId && (item.entryId === entryId || item.internalEntryId === entryId)
  );
}

/** A level that a line goes without may not come to lie within its range by a corrected concentration. */
function innerProblems(
  data: StudyData,
  set: StudyCalibrationSet,
  levels: readonly ProposedLevel[]
): readonly Problem[] {
  const nameOf = namesIn(data);
  return [...set.choices].flatMap(([entryId, { levelsLeftOut }]) => {
    const left = levelsLeftOut.filter((id) => levels.some(({ key }) => key === id));
    if (left.length === 0) return [];
    const held = levels.map(({ key, label, concentrations }) => ({
      id: key,
      label,
      concentration: concentrations.get(entryId) ?? null
    }));
    const problem = leavingOutProblem(held, left, 0);
    return problem
      ? [
          {
            path: 'levels',
            message: `${nameOf(entryId)} goes without ${listed(held.filter(({ id }) => left.includes(id)).map(({ label }) => label))}. With these concentrations: ${problem} Choose its line anew first.`
          }
        ]
      : [];
  });
}

function cellsThatDiffer(
  set: StudyCalibrationSet,
  levels: readonly ProposedLevel[],
  removed: readonly LevelData[],
  nameOf: (id: string) => string
): Pick<LevelChange, 'before' | 'after'> {
  const before: Record<string, string | number | null> = {};
  const after: Record<string, string | number | null> = {};
  const put = (what: string, old: string | number | null, now: string | number | null): void => {
    if (old === now) return;
    before[what] = old;
    after[what] = now;
  };
  for (const level of [
    ...levels,
    ...removed.map((gone) => ({ ...asProposed(gone), concentrations: new Map<string, number>(), gone }))
  ]) {
    const old = set.levels.find(({ id }) => id === level.key);
    const name = old?.label ?? level.label;
    put(`Level ${name}`, old?.label ?? null, 'gone' in level ? null : level.label);
    for (const id of new Set([...(old?.concentrations.keys() ?? []), ...level.concentrations.keys()])) {
      put(
        `${nameOf(id)} in ${name}, ng/mL`,
        old?.concentrations.get(id) ?? null,
        level.concentrations.get(id) ?? null
      );
    }
  }
  return { before, after };
}

/** The set as it would be. */
export const proposedSet = (set: StudyCalibrationSet, { levels }: LevelChange): StudyCalibrationSet => ({
  ...set,
  levels: levels.map(({ key, label, concentrations }, index) => ({
    id: key,
    number: set.levels.find(({ id }) => id === key)?.number ?? set.levels.length + index + 1,
    label,
    concentrations
  }))
});
