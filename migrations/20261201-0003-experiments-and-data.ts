import type { QueryInterface } from 'sequelize';

/** Calibration sets, experiments with their preparations, imports and what came of them. */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
CREATE TABLE calibration_sets (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  name text NOT NULL CHECK (length(name) BETWEEN 1 AND 120),
  instrument text NOT NULL CHECK (length(instrument) BETWEEN 1 AND 120),
  calibrated_on date NOT NULL,
  -- What an analyte without a choice of its own is fitted by.
  default_model text NOT NULL CHECK (default_model IN ('average response factor', 'linear', 'quadratic')),
  default_weighting text NOT NULL CHECK (default_weighting IN ('none', '1/x', '1/x2')),
  version integer NOT NULL DEFAULT 1,
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, study_id, id),
  UNIQUE (study_id, name),
  FOREIGN KEY (lab_id, study_id) REFERENCES studies (lab_id, id) ON DELETE CASCADE
);

CREATE TABLE calibration_levels (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  calibration_set_id uuid NOT NULL,
  number integer NOT NULL CHECK (number > 0),
  -- As it stands in the instrument's sample column: "L1", "CAL 5".
  label text NOT NULL CHECK (length(label) BETWEEN 1 AND 80),
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, study_id, id),
  UNIQUE (calibration_set_id, number),
  UNIQUE (calibration_set_id, label),
  FOREIGN KEY (lab_id, study_id, calibration_set_id)
    REFERENCES calibration_sets (lab_id, study_id, id) ON DELETE CASCADE
);

CREATE TABLE calibration_level_concentrations (
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  level_id uuid NOT NULL,
  panel_entry_id uuid NOT NULL,
  concentration_ng_per_ml double precision NOT NULL CHECK (concentration_ng_per_ml > 0),
  PRIMARY KEY (level_id, panel_entry_id),
  FOREIGN KEY (lab_id, study_id, level_id) REFERENCES calibration_levels (lab_id, study_id, id) ON DELETE CASCADE,
  FOREIGN KEY (lab_id, study_id, panel_entry_id) REFERENCES panel_entries (lab_id, study_id, id) ON DELETE RESTRICT
);

-- Immutable revisions of how one analyte is fitted: a choice, never a result.
CREATE TABLE calibration_fits (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  calibration_set_id uuid NOT NULL,
  panel_entry_id uuid NOT NULL,
  revision integer NOT NULL CHECK (revision > 0),
  model text NOT NULL CHECK (model IN ('average response factor', 'linear', 'quadratic')),
  weighting text NOT NULL CHECK (weighting IN ('none', '1/x', '1/x2')),
  -- Level ids left out, at the ends of the range only.
  levels_left_out uuid[] NOT NULL DEFAULT '{}',
  reason text NOT NULL CHECK (length(reason) > 0),
  chosen_by uuid NOT NULL REFERENCES users (id) ON DELETE RESTRICT,
  created_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (calibration_set_id, panel_entry_id, revision),
  FOREIGN KEY (lab_id, study_id, calibration_set_id)
    REFERENCES calibration_sets (lab_id, study_id, id) ON DELETE CASCADE,
  FOREIGN KEY (lab_id, study_id, panel_entry_id) REFERENCES panel_entries (lab_id, study_id, id) ON DELETE RESTRICT
);

CREATE TABLE experiments (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  -- Counts up within the study; part of the address.
  number integer NOT NULL CHECK (number > 0),
  stage_id uuid NOT NULL,
  title text NOT NULL CHECK (length(title) BETWEEN 1 AND 160),
  medium text NOT NULL CHECK (medium IN ('solvent', 'blank extract', 'matrix extract', 'reagent water', 'sample matrix')),
  matrix text,
  level_label text NOT NULL CHECK (length(level_label) BETWEEN 1 AND 80),
  subtract text NOT NULL CHECK (subtract IN ('none', 'native', 'method blank')),
  performed_on date,
  analyst_id uuid REFERENCES users (id) ON DELETE SET NULL,
  -- What its areas are turned into amounts by; null while nothing but amounts came in.
  calibration_set_id uuid,
  -- Prefilled in templates; what counts is what the data file says.
  sample_volume_ml double precision CHECK (sample_volume_ml > 0),
  final_volume_ml double precision CHECK (final_volume_ml > 0),
  version integer NOT NULL DEFAULT 1,
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, study_id, id),
  UNIQUE (study_id, number),
  FOREIGN KEY (lab_id, study_id) REFERENCES studies (lab_id, id) ON DELETE CASCADE,
  FOREIGN KEY (lab_id, study_id, stage_id) REFERENCES study_stages (lab_id, study_id, id) ON DELETE RESTRICT,
  FOREIGN KEY (lab_id, study_id, calibration_set_id)
    REFERENCES calibration_sets (lab_id, study_id, id) ON DELETE RESTRICT
);

-- The experiment that stands for a stage of a variant; others are shown beside it, never pooled.
CREATE TABLE stage_evidence (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  variant_id uuid NOT NULL,
  stage_id uuid NOT NULL,
  matrix text,
  level_label text,
  experiment_id uuid NOT NULL,
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE NULLS NOT DISTINCT (variant_id, stage_id, matrix, level_label),
  FOREIGN KEY (lab_id, study_id, variant_id) REFERENCES variants (lab_id, study_id, id) ON DELETE CASCADE,
  FOREIGN KEY (lab_id, study_id, stage_id) REFERENCES study_stages (lab_id, study_id, id) ON DELETE RESTRICT,
  FOREIGN KEY (lab_id, study_id, experiment_id) REFERENCES experiments (lab_id, study_id, id) ON DELETE CASCADE
);

-- What one preparation of a kind receives of one panel entry: targets, surrogates, extraction standards.
CREATE TABLE experiment_spikes (
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  experiment_id uuid NOT NULL,
  replicate_kind text NOT NULL CHECK (replicate_kind IN
    ('spiked', 'unspiked', 'method blank', 'post-extraction spike', 'solvent standard')),
  panel_entry_id uuid NOT NULL,
  amount_ng double precision NOT NULL CHECK (amount_ng > 0),
  PRIMARY KEY (experiment_id, replicate_kind, panel_entry_id),
  FOREIGN KEY (lab_id, study_id, experiment_id) REFERENCES experiments (lab_id, study_id, id) ON DELETE CASCADE,
  FOREIGN KEY (lab_id, study_id, panel_entry_id) REFERENCES panel_entries (lab_id, study_id, id) ON DELETE RESTRICT
);

-- How each injection internal standard enters the final extracts or vials of an experiment.
CREATE TABLE internal_standard_additions (
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  experiment_id uuid NOT NULL,
  panel_entry_id uuid NOT NULL,
  point text NOT NULL CHECK (point IN ('vial', 'extract', 'sample')),
  amount_ng double precision CHECK (amount_ng > 0),
  concentration_ng_per_ml double precision CHECK (concentration_ng_per_ml > 0),
  PRIMARY KEY (experiment_id, panel_entry_id),
  CHECK (CASE point WHEN 'vial' THEN concentration_ng_per_ml IS NOT NULL AND amount_ng IS NULL
                    ELSE amount_ng IS NOT NULL AND concentration_ng_per_ml IS NULL END),
  FOREIGN KEY (lab_id, study_id, experiment_id) REFERENCES experiments (lab_id, study_id, id) ON DELETE CASCADE,
  FOREIGN KEY (lab_id, study_id, panel_entry_id) REFERENCES panel_entries (lab_id, study_id, id) ON DELETE RESTRICT
);

CREATE TABLE fractions (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  experiment_id uuid NOT NULL,
  position integer NOT NULL CHECK (position > 0),
  name text NOT NULL CHECK (length(name) BETWEEN 1 AND 80),
  kind text NOT NULL,
  counts_as text NOT NULL CHECK (counts_as IN ('method', 'balance')),
  -- Keys of the stages it passed after it was collected and before it was measured.
  passed_stages text[] NOT NULL DEFAULT '{}',
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, study_id, id),
  UNIQUE (experiment_id, name),
  UNIQUE (experiment_id, position) DEFERRABLE INITIALLY DEFERRED,
  FOREIGN KEY (lab_id, study_id, experiment_id) REFERENCES experiments (lab_id, study_id, id) ON DELETE CASCADE
);

CREATE TABLE replicates (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  experiment_id uuid NOT NULL,
  number integer NOT NULL CHECK (number > 0),
  label text NOT NULL CHECK (length(label) BETWEEN 1 AND 80),
  kind text NOT NULL CHECK (kind IN
    ('spiked', 'unspiked', 'method blank', 'post-extraction spike', 'solvent standard')),
  batch text,
  sample_volume_ml double precision CHECK (sample_volume_ml > 0),
  sample_mass_g double precision CHECK (sample_mass_g > 0),
  collected_at timestamptz,
  extracted_at timestamptz,
  analysed_at timestamptz,
  observations text NOT NULL DEFAULT '',
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, study_id, id),
  UNIQUE (experiment_id, label),
  UNIQUE (experiment_id, kind, number),
  FOREIGN KEY (lab_id, study_id, experiment_id) REFERENCES experiments (lab_id, study_id, id) ON DELETE CASCADE
);

-- Where one preparation received another amount than its experiment says.
CREATE TABLE replicate_spikes (
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  replicate_id uuid NOT NULL,
  panel_entry_id uuid NOT NULL,
  amount_ng double precision NOT NULL CHECK (amount_ng > 0),
  PRIMARY KEY (replicate_id, panel_entry_id),
  FOREIGN KEY (lab_id, study_id, replicate_id) REFERENCES replicates (lab_id, study_id, id) ON DELETE CASCADE,
  FOREIGN KEY (lab_id, study_id, panel_entry_id) REFERENCES panel_entries (lab_id, study_id, id) ON DELETE RESTRICT
);

CREATE TABLE imports (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  file_name text NOT NULL CHECK (length(file_name) BETWEEN 1 AND 255),
  file_bytes bytea NOT NULL,
  byte_size integer NOT NULL CHECK (byte_size > 0),
  sha256 text NOT NULL CHECK (sha256 ~ '^[0-9a-f]{64}$'),
  -- What the person declared before reading: basis, decimal mark, answers to questions.
  declared jsonb NOT NULL DEFAULT '{}',
  -- Column map actually used, as recognised.
  reading jsonb,
  sheet_names text[] NOT NULL DEFAULT '{}',
  state text NOT NULL DEFAULT 'received' CHECK (state IN ('received', 'stored', 'dropped', 'superseded', 'withdrawn')),
  counts jsonb NOT NULL DEFAULT '{}',
  -- Order of storing within the lab: a later import covers the places of an earlier one.
  stored_order bigint UNIQUE,
  supersedes_id uuid,
  received_by uuid NOT NULL REFERENCES users (id) ON DELETE RESTRICT,
  received_at timestamptz NOT NULL DEFAULT now(),
  stored_by uuid REFERENCES users (id) ON DELETE RESTRICT,
  stored_at timestamptz,
  ended_by uuid REFERENCES users (id) ON DELETE RESTRICT,
  ended_at timestamptz,
  end_reason text,
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, study_id, id),
  CHECK ((state IN ('stored', 'superseded', 'withdrawn')) = (stored_order IS NOT NULL)),
  CHECK (state NOT IN ('superseded', 'withdrawn') OR end_reason IS NOT NULL),
  FOREIGN KEY (lab_id, study_id) REFERENCES studies (lab_id, id) ON DELETE RESTRICT,
  FOREIGN KEY (lab_id, study_id, supersedes_id) REFERENCES imports (lab_id, study_id, id) ON DELETE RESTRICT
);
CREATE UNIQUE INDEX imports_same_file ON imports (study_id, sha256) WHERE state = 'stored';
CREATE INDEX imports_study ON imports (lab_id, study_id, received_at DESC);
CREATE SEQUENCE imports_stored_order;

-- One run of the instrument, as one import brought it.
CREATE TABLE sequences (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  import_id uuid NOT NULL,
  instrument text NOT NULL,
  run_on date,
  created_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, study_id, id),
  FOREIGN KEY (lab_id, study_id, import_id) REFERENCES imports (lab_id, study_id, id) ON DELETE RESTRICT
);

-- The measured final extract of one preparation and fraction as one import reported it
-- (fraction null: a standard that is injected as it is).
CREATE TABLE extracts (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  import_id uuid NOT NULL,
  experiment_id uuid NOT NULL,
  replicate_id uuid NOT NULL,
  fraction_id uuid,
  final_volume_ml double precision CHECK (final_volume_ml > 0),
  aliquot_share double precision NOT NULL DEFAULT 1 CHECK (aliquot_share > 0 AND aliquot_share <= 1),
  created_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, study_id, id),
  UNIQUE NULLS NOT DISTINCT (import_id, replicate_id, fraction_id),
  FOREIGN KEY (lab_id, study_id, import_id) REFERENCES imports (lab_id, study_id, id) ON DELETE RESTRICT,
  FOREIGN KEY (lab_id, study_id, replicate_id) REFERENCES replicates (lab_id, study_id, id) ON DELETE RESTRICT,
  FOREIGN KEY (lab_id, study_id, fraction_id) REFERENCES fractions (lab_id, study_id, id) ON DELETE RESTRICT
);
CREATE INDEX extracts_experiment ON extracts (experiment_id);

CREATE TABLE injections (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  import_id uuid NOT NULL,
  sequence_id uuid NOT NULL,
  position integer NOT NULL CHECK (position > 0),
  kind text NOT NULL CHECK (kind IN ('level', 'check', 'blank', 'extract')),
  extract_id uuid,
  level_id uuid,
  -- Repeated injections of one extract count up from 1.
  number integer NOT NULL DEFAULT 1 CHECK (number > 0),
  dilution double precision NOT NULL DEFAULT 1 CHECK (dilution > 0),
  run_at timestamptz,
  created_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, study_id, id),
  CHECK ((kind = 'extract') = (extract_id IS NOT NULL)),
  CHECK ((kind = 'level') = (level_id IS NOT NULL)),
  FOREIGN KEY (lab_id, study_id, import_id) REFERENCES imports (lab_id, study_id, id) ON DELETE RESTRICT,
  FOREIGN KEY (lab_id, study_id, sequence_id) REFERENCES sequences (lab_id, study_id, id) ON DELETE RESTRICT,
  FOREIGN KEY (lab_id, study_id, extract_id) REFERENCES extracts (lab_id, study_id, id) ON DELETE RESTRICT,
  FOREIGN KEY (lab_id, study_id, level_id) REFERENCES calibration_levels (lab_id, study_id, id) ON DELETE RESTRICT
);
CREATE INDEX injections_extract ON injections (extract_id);
CREATE INDEX injections_level ON injections (level_id);
CREATE INDEX injections_import ON injections (import_id);

-- Only what was reported. The large table: no foreign keys (the import resolves and locks its
-- parents first and copies the rows in), narrow, immutable.
CREATE TABLE measurements (
  lab_id uuid NOT NULL,
  id bigint GENERATED ALWAYS AS IDENTITY,
  import_id uuid NOT NULL,
  injection_id uuid NOT NULL,
  -- exactly one of the two
  experiment_id uuid,
  calibration_set_id uuid,
  analyte_id uuid NOT NULL,
  basis text NOT NULL CHECK (basis IN ('area', 'vial', 'ng', 'ng_per_l')),
  state text NOT NULL CHECK (state IN ('value', 'not detected', 'below', 'above', 'missing')),
  -- the area, or the reported amount or concentration in the unit of its basis
  reported double precision,
  internal_area double precision,
  -- the internal standard that internal_area belongs to
  internal_analyte_id uuid,
  limit_value double precision,
  raw_text text NOT NULL,
  -- 1-based into imports.sheet_names; row and column 1-based as the sheet shows them
  sheet smallint NOT NULL,
  sheet_row integer NOT NULL,
  sheet_column smallint NOT NULL,
  PRIMARY KEY (lab_id, id),
  CHECK (num_nonnulls(experiment_id, calibration_set_id) = 1),
  CHECK ((state = 'value') = (reported IS NOT NULL) OR state IN ('below', 'above'))
);
CREATE INDEX measurements_experiment ON measurements (experiment_id, analyte_id) WHERE experiment_id IS NOT NULL;
CREATE INDEX measurements_calibration ON measurements (calibration_set_id, analyte_id) WHERE calibration_set_id IS NOT NULL;
CREATE INDEX measurements_import ON measurements (import_id);

-- Keyed by place, so that an exclusion survives a superseding import.
CREATE TABLE exclusions (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  experiment_id uuid NOT NULL,
  replicate_id uuid NOT NULL,
  fraction_id uuid,
  analyte_id uuid,
  cause text NOT NULL CHECK (length(cause) BETWEEN 3 AND 1000),
  excluded_by uuid NOT NULL REFERENCES users (id) ON DELETE RESTRICT,
  excluded_at timestamptz NOT NULL DEFAULT now(),
  lifted_by uuid REFERENCES users (id) ON DELETE RESTRICT,
  lifted_at timestamptz,
  lift_reason text,
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  CHECK ((lifted_at IS NULL) = (lifted_by IS NULL) AND (lifted_at IS NULL) = (lift_reason IS NULL)),
  FOREIGN KEY (lab_id, study_id, experiment_id) REFERENCES experiments (lab_id, study_id, id) ON DELETE RESTRICT,
  FOREIGN KEY (lab_id, study_id, replicate_id) REFERENCES replicates (lab_id, study_id, id) ON DELETE RESTRICT,
  FOREIGN KEY (lab_id, study_id, fraction_id) REFERENCES fractions (lab_id, study_id, id) ON DELETE RESTRICT,
  FOREIGN KEY (lab_id, analyte_id) REFERENCES analytes (lab_id, id) ON DELETE RESTRICT
);
CREATE UNIQUE INDEX exclusions_place ON exclusions (replicate_id, fraction_id, analyte_id)
  NULLS NOT DISTINCT WHERE lifted_at IS NULL;
`);
}
