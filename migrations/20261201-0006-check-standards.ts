import type { QueryInterface } from 'sequelize';

/**
 * What is run between the levels and the extracts to tell whether the calibration still holds: second-source and continuing
 * checks, and instrument blanks. Their injections arrive with imports, as those of levels and extracts do.
 */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
CREATE TABLE check_standards (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  calibration_set_id uuid NOT NULL,
  kind text NOT NULL CHECK (kind IN ('second source', 'continuing', 'instrument blank')),
  -- As it stands in the instrument's sample column: "ICV", "CCV 2", "IB".
  label text NOT NULL CHECK (length(label) BETWEEN 1 AND 80),
  -- Where it was bought or made, and its lot: free text.
  source text NOT NULL DEFAULT '' CHECK (length(source) <= 300),
  note text NOT NULL DEFAULT '' CHECK (length(note) <= 1000),
  version integer NOT NULL DEFAULT 1,
  -- What its injections are called, so that a reference can hold both to one another.
  injected_as text NOT NULL GENERATED ALWAYS AS (CASE kind WHEN 'instrument blank' THEN 'blank' ELSE 'check' END) STORED,
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, study_id, id),
  UNIQUE (lab_id, study_id, id, injected_as),
  UNIQUE (calibration_set_id, label),
  FOREIGN KEY (lab_id, study_id, calibration_set_id)
    REFERENCES calibration_sets (lab_id, study_id, id) ON DELETE CASCADE
);

-- A blank holds none of the analytes, but may hold the internal standards.
CREATE TABLE check_standard_concentrations (
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  check_standard_id uuid NOT NULL,
  panel_entry_id uuid NOT NULL,
  concentration_ng_per_ml double precision NOT NULL CHECK (concentration_ng_per_ml > 0),
  PRIMARY KEY (check_standard_id, panel_entry_id),
  FOREIGN KEY (lab_id, study_id, check_standard_id)
    REFERENCES check_standards (lab_id, study_id, id) ON DELETE CASCADE,
  FOREIGN KEY (lab_id, study_id, panel_entry_id) REFERENCES panel_entries (lab_id, study_id, id) ON DELETE RESTRICT
);

ALTER TABLE injections ADD COLUMN check_standard_id uuid;
ALTER TABLE injections ADD CONSTRAINT injections_check_standard
  CHECK ((kind IN ('check', 'blank')) = (check_standard_id IS NOT NULL));
-- kind is part of the key: a check refers to a check, a blank to an instrument blank.
ALTER TABLE injections ADD CONSTRAINT injections_check_kind
  FOREIGN KEY (lab_id, study_id, check_standard_id, kind)
  REFERENCES check_standards (lab_id, study_id, id, injected_as) ON DELETE RESTRICT;
CREATE INDEX injections_check ON injections (check_standard_id) WHERE check_standard_id IS NOT NULL;
CREATE INDEX injections_sequence ON injections (sequence_id);
CREATE INDEX sequences_import ON sequences (import_id);
`);
  for (const table of ['check_standards', 'check_standard_concentrations']) {
    await context.sequelize.query(`
CREATE TRIGGER ${table}_frozen BEFORE INSERT OR UPDATE OR DELETE ON ${table}
  FOR EACH ROW EXECUTE FUNCTION refuse_frozen_study();`);
  }
}
