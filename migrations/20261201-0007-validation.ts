import type { QueryInterface } from 'sequelize';

/** What a study's validation rests on: the experiments chosen for each part of it, and the preparations declared duplicates. */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
-- An experiment that stands for a part of the validation, of one variant or (null) of all of them.
CREATE TABLE validation_evidence (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  part text NOT NULL CHECK (part IN ('demonstration', 'confirmation', 'detection', 'precision', 'matrix', 'blanks',
    'control', 'duplicates')),
  variant_id uuid,
  experiment_id uuid NOT NULL,
  reason text NOT NULL CHECK (length(reason) BETWEEN 3 AND 1000),
  chosen_by uuid NOT NULL REFERENCES users (id) ON DELETE RESTRICT,
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, study_id, id),
  UNIQUE NULLS NOT DISTINCT (study_id, part, variant_id, experiment_id),
  FOREIGN KEY (lab_id, study_id) REFERENCES studies (lab_id, id) ON DELETE CASCADE,
  FOREIGN KEY (lab_id, study_id, variant_id) REFERENCES variants (lab_id, study_id, id) ON DELETE CASCADE,
  FOREIGN KEY (lab_id, study_id, experiment_id) REFERENCES experiments (lab_id, study_id, id) ON DELETE CASCADE
);

-- Two preparations of one experiment that were made as duplicates of each other.
CREATE TABLE duplicate_pairs (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  experiment_id uuid NOT NULL,
  first_replicate_id uuid NOT NULL,
  second_replicate_id uuid NOT NULL,
  reason text NOT NULL CHECK (length(reason) BETWEEN 3 AND 1000),
  declared_by uuid NOT NULL REFERENCES users (id) ON DELETE RESTRICT,
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, study_id, id),
  UNIQUE (first_replicate_id),
  UNIQUE (second_replicate_id),
  CHECK (first_replicate_id <> second_replicate_id),
  FOREIGN KEY (lab_id, study_id, experiment_id) REFERENCES experiments (lab_id, study_id, id) ON DELETE CASCADE,
  FOREIGN KEY (lab_id, study_id, first_replicate_id) REFERENCES replicates (lab_id, study_id, id) ON DELETE CASCADE,
  FOREIGN KEY (lab_id, study_id, second_replicate_id) REFERENCES replicates (lab_id, study_id, id) ON DELETE CASCADE
);

CREATE TRIGGER validation_evidence_frozen BEFORE INSERT OR UPDATE OR DELETE ON validation_evidence
  FOR EACH ROW EXECUTE FUNCTION refuse_frozen_study();
CREATE TRIGGER duplicate_pairs_frozen BEFORE INSERT OR UPDATE OR DELETE ON duplicate_pairs
  FOR EACH ROW EXECUTE FUNCTION refuse_frozen_study();
`);
}
