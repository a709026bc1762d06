import { QueryTypes } from 'sequelize';
import type {
  AdditionPoint,
  CheckStandardKind,
  PanelRole,
  ReplicateKind,
  ReportedBasis
} from '../../domain/vocabulary';
import { sequelize } from '../db/sequelize';
import type { ColumnMap } from '../../schemas/column-map';
import type { CellMend } from '../imports/mends';
import type {
  Assignment,
  CalibrationSetExpectation,
  CheckExpectation,
  DecimalMark,
  Expectation,
  ExperimentExpectation,
  PanelExpectation
} from '../imports/types';

/** What a person declared about a file, often in answer to a question. */
export interface Declared {
  readonly basis: ReportedBasis | null;
  readonly decimal: DecimalMark | null;
  /** The experiment whose page the file was dropped on. */
  readonly experimentId: string | null;
  /** How the file is to be read where somebody changed what was recognised; null: as recognised, or by a kept map. */
  readonly map: ColumnMap | null;
  /** What sample labels mean, by the label as it stands in the file. */
  readonly assignments: Readonly<Record<string, Assignment>>;
  readonly mends: readonly CellMend[];
}

export const nothingDeclared: Declared = {
  basis: null,
  decimal: null,
  experimentId: null,
  map: null,
  assignments: {},
  mends: []
};

/** What is declared about a kept file, as its row holds it. */
export function declaredOf(row: unknown): Declared {
  return { ...nothingDeclared, ...(row as Partial<Declared>) };
}

interface ExperimentRow {
  readonly id: string;
  readonly number: number;
  readonly title: string;
  readonly final_volume_ml: number | null;
  readonly sample_volume_ml: number | null;
  readonly calibration_set_id: string | null;
}
interface ReplicateRow {
  readonly id: string;
  readonly experiment_id: string;
  readonly label: string;
  readonly kind: ReplicateKind;
  readonly sample_volume_ml: number | null;
  readonly sample_mass_g: number | null;
  readonly collected_at: Date | null;
  readonly extracted_at: Date | null;
}
interface SpikeRow {
  /** Of an experiment for one kind of replicate, or of one replicate instead. */
  readonly experiment_id: string | null;
  readonly replicate_id: string | null;
  readonly kind: ReplicateKind | null;
  readonly panel_entry_id: string;
  readonly amount_ng: number;
}
interface FractionRow {
  readonly id: string;
  readonly experiment_id: string;
  readonly name: string;
}
interface PanelRow {
  readonly id: string;
  readonly name: string;
  readonly synonyms: string[];
  readonly cas: string | null;
  readonly role: PanelRole;
  readonly internal_standard_entry_id: string | null;
  readonly low_level: number | null;
  readonly high_level: number | null;
}
interface LevelRow {
  readonly set_id: string;
  readonly set_name: string;
  readonly instrument: string;
  readonly id: string | null;
  readonly label: string | null;
}
interface CheckRow {
  readonly set_id: string;
  readonly id: string;
  readonly label: string;
  readonly kind: CheckStandardKind;
}
interface PointRow {
  readonly experiment_id: string;
  readonly panel_entry_id: string;
  readonly point: AdditionPoint;
}

/**
 * Where the internal standard of an entry goes in. The reader needs to know whether a final volume is needed; where
 * experiments of the study differ and none is named, the practice that needs more is assumed.
 */
function additionPoint(
  points: readonly PointRow[],
  standardId: string,
  experimentId: string | null
): AdditionPoint {
  const own = points.filter((row) => row.panel_entry_id === standardId);
  const here = own.find((row) => row.experiment_id === experimentId);
  if (here) return here.point;
  if (own.some((row) => row.point === 'vial')) return 'vial';
  return own[0]?.point ?? 'vial';
}

/**
 * What a study offers for a spreadsheet to be matched with: its experiments with their preparations and fractions, the
 * panel with every name it goes by, and the calibration levels. Plain data.
 */
export async function loadExpectation(
  where: Readonly<{ labId: string; studyId: string }>,
  declared: Declared
): Promise<Expectation> {
  const select = <Row extends object>(sql: string): Promise<Row[]> =>
    sequelize.query<Row>(sql, { bind: [where.labId, where.studyId], type: QueryTypes.SELECT });

  const experiments = await select<ExperimentRow>(
    `SELECT id, number, title, final_volume_ml, sample_volume_ml, calibration_set_id FROM experiments
      WHERE lab_id = $1 AND study_id = $2 ORDER BY number`
  );
  const replicates = await select<ReplicateRow>(
    `SELECT id, experiment_id, label, kind, sample_volume_ml, sample_mass_g, collected_at, extracted_at FROM replicates
      WHERE lab_id = $1 AND study_id = $2 ORDER BY kind, number`
  );
  const fractions = await select<FractionRow>(
    `SELECT id, experiment_id, name FROM fractions WHERE lab_id = $1 AND study_id = $2 ORDER BY position`
  );
  const panel = await select<PanelRow>(
    `SELECT p.id, v.name, v.synonyms, v.cas, p.role, p.internal_standard_entry_id,
        c.low AS low_level, c.high AS high_level
      FROM panel_entries p JOIN analyte_versions v ON v.lab_id = p.lab_id AND v.id = p.analyte_version_id
        LEFT JOIN (
          SELECT panel_entry_id, min(concentration_ng_per_ml) AS low, max(concentration_ng_per_ml) AS high
            FROM calibration_level_concentrations WHERE lab_id = $1 AND study_id = $2 GROUP BY panel_entry_id
        ) c ON c.panel_entry_id = p.id
      WHERE p.lab_id = $1 AND p.study_id = $2 ORDER BY p.position`
  );
  const levels = await select<LevelRow>(
    `SELECT s.id AS set_id, s.name AS set_name, s.instrument, l.id, l.label
      FROM calibration_sets s LEFT JOIN calibration_levels l ON l.calibration_set_id = s.id
      WHERE s.lab_id = $1 AND s.study_id = $2 ORDER BY s.created_at, s.id, l.number`
  );
  const checks = await select<CheckRow>(
    `SELECT calibration_set_id AS set_id, id, label, kind FROM check_standards
      WHERE lab_id = $1 AND study_id = $2 ORDER BY created_at, id`
  );
  const points = await select<PointRow>(
    `SELECT experiment_id, panel_entry_id, point FROM internal_standard_additions WHERE lab_id = $1 AND study_id = $2`
  );

  const spikes = await select<SpikeRow>(
    `SELECT experiment_id, NULL AS replicate_id, replicate_kind AS kind, panel_entry_id, amount_ng
        FROM experiment_spikes WHERE lab_id = $1 AND study_id = $2
      UNION ALL
      SELECT NULL, replicate_id, NULL, panel_entry_id, amount_ng
        FROM replicate_spikes WHERE lab_id = $1 AND study_id = $2
      ORDER BY 1, 2, 3, 4`
  );

  const spikesOf = new Map<string, SpikeRow[]>();
  for (const spike of spikes) {
    const owner = spike.experiment_id ?? spike.replicate_id ?? '';
    const own = spikesOf.get(owner);
    if (own) own.push(spike);
    else spikesOf.set(owner, [spike]);
  }

  return {
    experiments: experiments.map((row) => experimentExpectation(row, replicates, fractions, spikesOf)),
    panel: panel.map((row): PanelExpectation => {
      const standard = row.internal_standard_entry_id;
      return {
        id: row.id,
        name: row.name,
        synonyms: row.synonyms,
        cas: row.cas,
        role: row.role,
        internalStandard:
          standard === null
            ? null
            : { panelEntryId: standard, point: additionPoint(points, standard, declared.experimentId) },
        hasLowestLevel: row.low_level !== null,
        levelRange:
          row.low_level === null || row.high_level === null
            ? null
            : { low: row.low_level, high: row.high_level }
      };
    }),
    calibrationSets: calibrationSetExpectations(levels, checks),
    experimentId: declared.experimentId,
    declared: { basis: declared.basis, decimal: declared.decimal, assignments: declared.assignments }
  };
}

function experimentExpectation(
  row: ExperimentRow,
  replicates: readonly ReplicateRow[],
  fractions: readonly FractionRow[],
  spikesOf: ReadonlyMap<string, readonly SpikeRow[]>
): ExperimentExpectation {
  const own = fractions.filter((fraction) => fraction.experiment_id === row.id);
  return {
    id: row.id,
    title: row.title,
    calibrationSetId: row.calibration_set_id,
    spikesNg: spikesByKind(spikesOf.get(row.id) ?? []),
    replicates: replicates
      .filter((replicate) => replicate.experiment_id === row.id)
      .map((replicate) => ({
        id: replicate.id,
        label: replicate.label,
        kind: replicate.kind,
        takesFraction: own.length > 0 && replicate.kind !== 'solvent standard',
        finalVolumeMl: row.final_volume_ml,
        sampleVolumeMl: replicate.sample_volume_ml ?? row.sample_volume_ml,
        sampleMassG: replicate.sample_mass_g,
        collectedAt: replicate.collected_at?.toISOString() ?? null,
        extractedAt: replicate.extracted_at?.toISOString() ?? null,
        spikesNg: amounts(spikesOf.get(replicate.id) ?? [])
      })),
    fractions: own.map(({ id, name }) => ({ id, name }))
  };
}

function spikesByKind(spikes: readonly SpikeRow[]): ExperimentExpectation['spikesNg'] {
  const kinds = new Set(spikes.flatMap(({ kind }) => (kind === null ? [] : [kind])));
  return Object.fromEntries(
    [...kinds].map((kind) => [kind, amounts(spikes.filter((spike) => spike.kind === kind))])
  );
}

function amounts(spikes: readonly SpikeRow[]): Record<string, number> {
  return Object.fromEntries(spikes.map((spike) => [spike.panel_entry_id, spike.amount_ng]));
}

function calibrationSetExpectations(
  levels: readonly LevelRow[],
  checks: readonly CheckRow[]
): CalibrationSetExpectation[] {
  type Growing = CalibrationSetExpectation & {
    readonly levels: { id: string; name: string }[];
    readonly checks: CheckExpectation[];
  };
  const sets = new Map<string, Growing>();
  for (const { set_id: setId, set_name: name, instrument, id, label } of levels) {
    const set = sets.get(setId) ?? { id: setId, name, instrument, levels: [], checks: [] };
    sets.set(setId, set);
    if (id !== null && label !== null) set.levels.push({ id, name: label });
  }
  for (const { set_id: setId, id, label, kind } of checks) {
    sets.get(setId)?.checks.push({ id, name: label, kind });
  }
  return [...sets.values()];
}
