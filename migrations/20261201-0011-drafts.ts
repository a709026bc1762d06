import type { QueryInterface } from 'sequelize';

/**
 * What somebody types into the grid of an experiment before it is stored: outside history and data version until then, one for each
 * person and experiment.
 */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
CREATE TABLE drafts (
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  experiment_id uuid NOT NULL,
  user_id uuid NOT NULL REFERENCES users (id) ON DELETE CASCADE,
  basis text NOT NULL DEFAULT 'area' CHECK (basis IN ('area', 'vial', 'ng', 'ng_per_l')),
  -- How many injections of each extract the grid has rows for.
  injections integer NOT NULL DEFAULT 1 CHECK (injections BETWEEN 1 AND 6),
  -- Text as typed, by row key and column key.
  cells jsonb NOT NULL DEFAULT '{}' CHECK (jsonb_typeof(cells) = 'object'),
  -- The import that it was last handed on as.
  import_id uuid,
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  PRIMARY KEY (experiment_id, user_id),
  FOREIGN KEY (lab_id, study_id, experiment_id) REFERENCES experiments (lab_id, study_id, id) ON DELETE CASCADE,
  FOREIGN KEY (lab_id, study_id, import_id) REFERENCES imports (lab_id, study_id, id) ON DELETE RESTRICT
);
CREATE INDEX drafts_user ON drafts (user_id, updated_at DESC);
`);
}
