import { fitCalibration, StatsError } from '../stats';
import type { CalibrationLevel, CalibrationSet, FitChoice, LevelReported, PanelEntry } from './types';

export interface CalibrationPoint {
  readonly x: number;
  readonly y: number;
  readonly level: CalibrationLevel;
  readonly reported: LevelReported;
}

/** A level injection that is no point of the line, and why. */
export interface UnusedPoint {
  readonly level: CalibrationLevel;
  readonly reported: LevelReported;
  readonly why: string;
}

/** The line that turns one analyte's response into a concentration, or the reason why there is none. */
export type Calibration =
  | {
      readonly usable: true;
      readonly set: CalibrationSet;
      readonly entryId: string;
      readonly choice: FitChoice;
      /** concentration: area against ng/mL; ratio: area ratio against concentration ratio. */
      readonly scale: 'concentration' | 'ratio';
      readonly standardId: string | null;
      readonly points: readonly CalibrationPoint[];
      readonly unused: readonly UnusedPoint[];
      readonly fit: ReturnType<typeof fitCalibration>;
    }
  | {
      readonly usable: false;
      readonly set: CalibrationSet | null;
      readonly entryId: string;
      readonly reason: string;
    };

/** The fit revision in force for an entry, else the default of its set. */
export function fitChoiceOf(set: CalibrationSet, entryId: string): FitChoice {
  return (
    set.choices.get(entryId) ?? {
      fitId: null,
      revision: null,
      model: set.defaultModel,
      weighting: set.defaultWeighting,
      levelsLeftOut: []
    }
  );
}

/**
 * Fits one analyte from the level injections of its set. External: area A against the level's concentration (ng/mL).
 * With an internal standard: A/A_is against q = c_level/c_is,level. Every injection of a level is a point of its own.
 *
 * Never throws: what stands in the way is told in `reason`.
 */
export function calibrate(
  set: CalibrationSet | null,
  entry: PanelEntry,
  nameOf: (entryId: string) => string
): Calibration {
  const refuse = (reason: string): Calibration => ({ usable: false, set, entryId: entry.id, reason });
  if (!set) return refuse('The experiment names no calibration set, so its areas cannot become amounts.');

  const choice = fitChoiceOf(set, entry.id);
  const levels = new Map(set.levels.map((level) => [level.id, level]));
  const points: CalibrationPoint[] = [];
  const unused: UnusedPoint[] = [];
  for (const reported of reportedOfEntry(set, entry.id)) {
    const level = levels.get(reported.levelId);
    if (!level) continue;
    if (wrongStandard(reported, entry.internalStandardId)) {
      return refuse(
        `Level ${level.label} of ${set.name} was recorded against ${namedStandard(reported.internalEntryId, nameOf)}, but ` +
          `${panelNow(entry.name, entry.internalStandardId, nameOf)}.`
      );
    }
    const point = pointOf(reported, level, entry, choice, nameOf);
    if (typeof point === 'string') unused.push({ level, reported, why: point });
    else points.push(point);
  }
  if (points.length === 0) {
    const why = unused[0] ? ` (${unused[0].level.label}: ${unused[0].why})` : '';
    return refuse(`${set.name} holds no usable level of ${entry.name}${why}.`);
  }
  try {
    const fit = fitCalibration(points, { model: choice.model, weighting: choice.weighting });
    return {
      usable: true,
      set,
      entryId: entry.id,
      choice,
      scale: entry.internalStandardId ? 'ratio' : 'concentration',
      standardId: entry.internalStandardId,
      points,
      unused,
      fit
    };
  } catch (error) {
    if (error instanceof StatsError)
      return refuse(`${set.name} gives no line for ${entry.name}: ${error.message}`);
    throw error;
  }
}

const sorted = new WeakMap<CalibrationSet, ReadonlyMap<string, readonly LevelReported[]>>();

/** What a set holds of one entry; sorted once, since every entry of a panel asks. */
function reportedOfEntry(set: CalibrationSet, entryId: string): readonly LevelReported[] {
  const known = sorted.get(set);
  if (known) return known.get(entryId) ?? [];
  const byEntry = new Map<string, LevelReported[]>();
  for (const reported of set.reported) {
    const ofEntry = byEntry.get(reported.entryId);
    if (ofEntry) ofEntry.push(reported);
    else byEntry.set(reported.entryId, [reported]);
  }
  sorted.set(set, byEntry);
  return byEntry.get(entryId) ?? [];
}

/** Lowest concentration (ng/mL) of the entry among the levels of the set that are not left out; null: none holds it. */
export function lowestConcentration({ set, entryId }: Calibration): number | null {
  if (!set) return null;
  const { levelsLeftOut } = fitChoiceOf(set, entryId);
  const held = set.levels
    .filter((level) => !levelsLeftOut.includes(level.id))
    .map((level) => level.concentrations.get(entryId) ?? 0)
    .filter((concentration) => concentration > 0);
  return held.length > 0 ? Math.min(...held) : null;
}

/**
 * True when an area was recorded against another standard than the one asked for: an internal area of another or an unnamed one, or, where
 * none is asked for now (null), of any that was named.
 */
export function wrongStandard(
  reported: { readonly internalArea: number | null; readonly internalEntryId: string | null },
  standardId: string | null
): boolean {
  if (standardId === null) return reported.internalEntryId !== null;
  return reported.internalArea !== null && reported.internalEntryId !== standardId;
}

/** "the panel now divides Caffeine by Label", "the panel now reads Caffeine without a standard" */
export function panelNow(
  name: string,
  standardId: string | null,
  nameOf: (entryId: string) => string
): string {
  return standardId === null
    ? `the panel now reads ${name} without a standard`
    : `the panel now divides ${name} by ${nameOf(standardId)}`;
}

export function namedStandard(id: string | null, nameOf: (entryId: string) => string): string {
  return id === null ? 'a standard the file does not name' : nameOf(id);
}

function pointOf(
  reported: LevelReported,
  level: CalibrationLevel,
  entry: PanelEntry,
  choice: FitChoice,
  nameOf: (entryId: string) => string
): CalibrationPoint | string {
  if (choice.levelsLeftOut.includes(level.id)) return 'left out of the fit';
  if (reported.basis !== 'area') return 'not an area';
  if (reported.state !== 'value' || reported.value === null) return reported.state;
  const concentration = level.concentrations.get(entry.id);
  if (concentration === undefined) return `no concentration of ${entry.name} is recorded`;
  if (!entry.internalStandardId) return { x: concentration, y: reported.value, level, reported };

  const standard = nameOf(entry.internalStandardId);
  const standardConcentration = level.concentrations.get(entry.internalStandardId);
  if (standardConcentration === undefined) return `no concentration of ${standard} is recorded`;
  if (reported.internalArea === null || reported.internalArea <= 0) return `no area of ${standard}`;
  return {
    x: concentration / standardConcentration,
    y: reported.value / reported.internalArea,
    level,
    reported
  };
}
