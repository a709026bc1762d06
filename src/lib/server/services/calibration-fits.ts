import { QueryTypes } from 'sequelize';
import type { CalibrationModelName, CalibrationWeighting } from '../../domain/vocabulary';
import type { CalibrationSetView, FitPointView, FitView } from '../../views/calibration';
import { calibrate, fitChoiceOf, type Calibration } from '../amounts/calibration';
import type { CalibrationSet } from '../amounts/types';
import { sequelize } from '../db/sequelize';
import { NotFound } from '../errors';
import { ruleOf } from './figures/criteria';
import type { StudyData, StudyPanelEntry } from './figures/study-data';

interface ChoiceRow {
  readonly panelEntryId: string;
  readonly revision: number;
  readonly model: CalibrationModelName;
  readonly weighting: CalibrationWeighting;
  readonly reason: string;
  readonly by: string;
  readonly at: Date;
}

async function choicesOf(data: StudyData, setId: string): Promise<readonly ChoiceRow[]> {
  return sequelize.query<ChoiceRow>(
    `SELECT f.panel_entry_id AS "panelEntryId", f.revision, f.model, f.weighting, f.reason, u.name AS by, f.created_at AS at
      FROM calibration_fits f JOIN users u ON u.id = f.chosen_by
      WHERE f.lab_id = $1 AND f.calibration_set_id = $2 ORDER BY f.revision DESC`,
    { bind: [data.labId, setId], type: QueryTypes.SELECT }
  );
}

interface Limits {
  readonly every: number | null;
  readonly lowest: number | null;
}

/** The level errors of a line against the study's rules; the lowest level may have a rule of its own. */
function pointViews(
  calibration: Extract<Calibration, { usable: true }>,
  limits: Limits
): readonly FitPointView[] {
  const lowest = Math.min(...calibration.points.map(({ x }) => x));
  return calibration.fit.points.map((point, index) => {
    const level = calibration.points[index]?.level;
    const limit = point.x === lowest ? (limits.lowest ?? limits.every) : limits.every;
    return {
      levelId: level?.id ?? '',
      levelLabel: level?.label ?? '',
      x: point.x,
      y: point.y,
      fitted: point.fitted,
      backCalculated: point.backCalculated,
      errorPercent: point.errorPercent,
      holds: limit === null || point.errorPercent === null ? null : Math.abs(point.errorPercent) <= limit
    };
  });
}

function fitView(
  set: CalibrationSet,
  entry: StudyPanelEntry,
  nameOf: (id: string) => string,
  choices: readonly ChoiceRow[],
  limits: Limits
): FitView {
  const choice = fitChoiceOf(set, entry.id);
  const calibration = calibrate(set, entry, nameOf);
  const rows = choices.filter(({ panelEntryId }) => panelEntryId === entry.id);
  const own = rows.find(({ revision }) => revision === choice.revision);
  const fit = calibration.usable ? calibration.fit : null;
  return {
    entryId: entry.id,
    name: entry.name,
    role: entry.role,
    standardName: entry.internalStandardId ? nameOf(entry.internalStandardId) : null,
    revision: choice.revision ?? 0,
    model: choice.model,
    weighting: choice.weighting,
    levelsLeftOut: choice.levelsLeftOut,
    choice: own ? { by: own.by, at: own.at.toISOString(), reason: own.reason } : null,
    earlier: rows
      .filter((row) => row !== own)
      .map(({ revision, model, weighting, by, at, reason }) => ({
        revision,
        model,
        weighting,
        by,
        at: at.toISOString(),
        reason
      })),
    scale: calibration.usable ? calibration.scale : null,
    coefficients: fit?.coefficients ?? [],
    r2: fit?.r2 ?? null,
    rse: fit?.rse ?? null,
    responseFactorRsd: fit?.responseFactorRsd ?? null,
    range: fit?.range ?? null,
    points: calibration.usable ? pointViews(calibration, limits) : [],
    unused: calibration.usable
      ? calibration.unused.map(({ level, why }) => ({ levelId: level.id, levelLabel: level.label, why }))
      : [],
    refusal: calibration.usable ? null : calibration.reason
  };
}

/** The levels of a set and the fit of every panel entry that they hold, read from the study's figures. */
export async function fitViewsOf(
  data: StudyData,
  setId: string
): Promise<
  Pick<
    CalibrationSetView,
    'levelList' | 'concentrations' | 'fits' | 'missing' | 'errorLimit' | 'lowestErrorLimit'
  >
> {
  const set = data.calibrationSets.find(({ id }) => id === setId);
  if (!set) throw new NotFound();
  const names = new Map(data.panel.map(({ id, name }) => [id, name]));
  const nameOf = (id: string): string => names.get(id) ?? 'an analyte off the panel';
  const choices = await choicesOf(data, setId);
  const { rules } = data.criteriaSet;
  const limits = {
    every: ruleOf(rules, 'calibration error')?.high ?? null,
    lowest: ruleOf(rules, 'calibration error at the lowest level')?.high ?? null
  };
  const inSet = (id: string): boolean => set.levels.some(({ concentrations }) => concentrations.has(id));
  const varies = (id: string): boolean =>
    new Set(set.levels.map((level) => level.concentrations.get(id))).size > 1;
  const held = data.panel.filter(({ id }) => inSet(id));
  const perEntry = held.map(({ id }) => [
    id,
    Object.fromEntries(
      set.levels.flatMap((level) => {
        const value = level.concentrations.get(id);
        return value === undefined ? [] : [[level.id, value]];
      })
    )
  ]);
  return {
    levelList: set.levels.map(({ id, number, label }) => ({ id, number, label })),
    concentrations: Object.fromEntries(perEntry) as CalibrationSetView['concentrations'],
    // An internal standard is the same in every level: no line can be drawn through it.
    fits: held
      .filter(({ id, role }) => role === 'target' || role === 'surrogate' || varies(id))
      .map((entry) => fitView(set, entry, nameOf, choices, limits)),
    missing: data.panel.filter(({ id }) => !inSet(id)).map(({ name }) => name),
    errorLimit: limits.every,
    lowestErrorLimit: limits.lowest
  };
}
