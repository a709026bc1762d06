import type { QueryInterface } from 'sequelize';

/**
 * The library (lasting rows with immutable versions), studies and what the chemist plans in them.
 * Every tenant row carries its lab, and foreign keys between tenant rows are composite, so that a
 * row cannot point into another lab; rows of a study carry the study for the same reason.
 */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
CREATE TABLE analytes (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL REFERENCES labs (id) ON DELETE CASCADE,
  current_version_id uuid,
  archived_at timestamptz,
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, id)
);

CREATE TABLE analyte_versions (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  analyte_id uuid NOT NULL,
  version integer NOT NULL CHECK (version > 0),
  name text NOT NULL CHECK (length(name) BETWEEN 1 AND 200),
  synonyms text[] NOT NULL DEFAULT '{}',
  cas text CHECK (cas ~ '^[0-9]{2,7}-[0-9]{2}-[0-9]$'),
  smiles text,
  formula text,
  molar_mass double precision CHECK (molar_mass > 0),
  log_kow double precision,
  pka_acid double precision[] NOT NULL DEFAULT '{}',
  pka_base double precision[] NOT NULL DEFAULT '{}',
  boiling_point_c double precision,
  vapour_pressure_pa double precision CHECK (vapour_pressure_pa >= 0),
  henry_pa_m3_mol double precision CHECK (henry_pa_m3_mol >= 0),
  water_solubility_mg_l double precision CHECK (water_solubility_mg_l >= 0),
  class text,
  -- property name -> where the value was taken from
  sources jsonb NOT NULL DEFAULT '{}',
  note text,
  created_by uuid REFERENCES users (id) ON DELETE SET NULL,
  created_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, id),
  UNIQUE (lab_id, analyte_id, id),
  UNIQUE (analyte_id, version),
  FOREIGN KEY (lab_id, analyte_id) REFERENCES analytes (lab_id, id) ON DELETE CASCADE
);
ALTER TABLE analytes ADD FOREIGN KEY (lab_id, id, current_version_id)
  REFERENCES analyte_versions (lab_id, analyte_id, id) DEFERRABLE INITIALLY DEFERRED;

CREATE TABLE criteria_sets (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL REFERENCES labs (id) ON DELETE CASCADE,
  current_version_id uuid,
  archived_at timestamptz,
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, id)
);

CREATE TABLE criteria_set_versions (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  criteria_set_id uuid NOT NULL,
  version integer NOT NULL CHECK (version > 0),
  name text NOT NULL CHECK (length(name) BETWEEN 1 AND 200),
  rules jsonb NOT NULL CHECK (jsonb_typeof(rules) = 'array'),
  created_by uuid REFERENCES users (id) ON DELETE SET NULL,
  created_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, id),
  UNIQUE (lab_id, criteria_set_id, id),
  UNIQUE (criteria_set_id, version),
  FOREIGN KEY (lab_id, criteria_set_id) REFERENCES criteria_sets (lab_id, id) ON DELETE CASCADE
);
ALTER TABLE criteria_sets ADD FOREIGN KEY (lab_id, id, current_version_id)
  REFERENCES criteria_set_versions (lab_id, criteria_set_id, id) DEFERRABLE INITIALLY DEFERRED;

CREATE TABLE studies (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL REFERENCES labs (id) ON DELETE RESTRICT,
  -- Part of every address of the study.
  code text NOT NULL CHECK (code ~ '^[A-Za-z0-9][A-Za-z0-9-]{1,39}$'),
  title text NOT NULL CHECK (length(title) BETWEEN 1 AND 200),
  matrix text NOT NULL CHECK (length(matrix) BETWEEN 1 AND 200),
  objective text NOT NULL DEFAULT '',
  sample_volume_ml double precision CHECK (sample_volume_ml > 0),
  state text NOT NULL DEFAULT 'draft' CHECK (state IN ('draft', 'in review', 'returned', 'reviewed', 'signed')),
  revision integer NOT NULL DEFAULT 1 CHECK (revision > 0),
  -- Raised by every change of content; caches of figures carry the value they saw.
  data_version bigint NOT NULL DEFAULT 1,
  version integer NOT NULL DEFAULT 1,
  criteria_set_id uuid NOT NULL,
  criteria_set_version_id uuid NOT NULL,
  owner_id uuid NOT NULL REFERENCES users (id) ON DELETE RESTRICT,
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, id),
  FOREIGN KEY (lab_id, criteria_set_id, criteria_set_version_id)
    REFERENCES criteria_set_versions (lab_id, criteria_set_id, id) ON DELETE RESTRICT
);
CREATE UNIQUE INDEX studies_code ON studies (lab_id, lower(code));

CREATE TABLE study_stages (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  key text NOT NULL CHECK (key ~ '^[a-z][a-z0-9-]{0,39}$'),
  name text NOT NULL,
  -- 1 is the mouth (detector); the highest is the source (sample).
  position integer NOT NULL CHECK (position > 0),
  kind text NOT NULL CHECK (kind IN ('signal', 'loss')),
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, study_id, id),
  UNIQUE (study_id, key),
  UNIQUE (study_id, position) DEFERRABLE INITIALLY DEFERRED,
  FOREIGN KEY (lab_id, study_id) REFERENCES studies (lab_id, id) ON DELETE CASCADE
);

CREATE TABLE panel_entries (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  analyte_id uuid NOT NULL,
  analyte_version_id uuid NOT NULL,
  role text NOT NULL CHECK (role IN ('target', 'surrogate', 'extraction internal standard', 'injection internal standard')),
  position integer NOT NULL CHECK (position > 0),
  -- What its area is divided by; null: external calibration.
  internal_standard_entry_id uuid CHECK (internal_standard_entry_id <> id),
  -- { low, high, rsdMax, nMin, reason }
  criteria_override jsonb,
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, study_id, id),
  UNIQUE (study_id, analyte_id),
  FOREIGN KEY (lab_id, study_id) REFERENCES studies (lab_id, id) ON DELETE CASCADE,
  FOREIGN KEY (lab_id, analyte_id, analyte_version_id)
    REFERENCES analyte_versions (lab_id, analyte_id, id) ON DELETE RESTRICT,
  FOREIGN KEY (lab_id, study_id, internal_standard_entry_id)
    REFERENCES panel_entries (lab_id, study_id, id) ON DELETE RESTRICT DEFERRABLE INITIALLY DEFERRED
);

CREATE TABLE variants (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  code text NOT NULL CHECK (code ~ '^[A-Za-z0-9]{1,8}$'),
  name text NOT NULL CHECK (length(name) BETWEEN 1 AND 160),
  description text NOT NULL DEFAULT '',
  position integer NOT NULL CHECK (position > 0),
  version integer NOT NULL DEFAULT 1,
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, study_id, id),
  UNIQUE (study_id, code),
  FOREIGN KEY (lab_id, study_id) REFERENCES studies (lab_id, id) ON DELETE CASCADE
);

CREATE TABLE procedure_steps (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  variant_id uuid NOT NULL,
  stage_id uuid NOT NULL,
  position integer NOT NULL CHECK (position > 0),
  kind text NOT NULL,
  -- Free words of the chemist: what is done, with what, how much.
  instruction text NOT NULL CHECK (length(instruction) BETWEEN 1 AND 2000),
  -- { ph?, solvent?, volumeMl?, minutes?, temperatureC? }
  parameters jsonb NOT NULL DEFAULT '{}',
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (variant_id, position) DEFERRABLE INITIALLY DEFERRED,
  FOREIGN KEY (lab_id, study_id, variant_id) REFERENCES variants (lab_id, study_id, id) ON DELETE CASCADE,
  FOREIGN KEY (lab_id, study_id, stage_id) REFERENCES study_stages (lab_id, study_id, id) ON DELETE RESTRICT
);
`);
}
