import type { QueryInterface } from 'sequelize';

/** Descriptions of spreadsheet layouts that a lab keeps, in versions, and which of them an import was read by. */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
CREATE TABLE column_maps (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL REFERENCES labs (id) ON DELETE CASCADE,
  name text NOT NULL CHECK (length(name) BETWEEN 1 AND 120),
  -- No longer applied by itself; what was read by it stays readable.
  retired_at timestamptz,
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, id)
);
CREATE UNIQUE INDEX column_maps_name ON column_maps (lab_id, lower(name));

CREATE TABLE column_map_versions (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL,
  column_map_id uuid NOT NULL,
  version integer NOT NULL CHECK (version > 0),
  map jsonb NOT NULL,
  saved_by uuid NOT NULL REFERENCES users (id) ON DELETE RESTRICT,
  created_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, id),
  UNIQUE (column_map_id, version),
  FOREIGN KEY (lab_id, column_map_id) REFERENCES column_maps (lab_id, id) ON DELETE RESTRICT
);
CREATE TRIGGER column_map_versions_immutable BEFORE UPDATE OR DELETE ON column_map_versions
  FOR EACH ROW EXECUTE FUNCTION refuse_change();
CREATE TRIGGER column_map_versions_no_truncate BEFORE TRUNCATE ON column_map_versions
  FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();

-- The kept map that applied by itself when the file was stored; null: it was read as recognised, or by a map of its own.
ALTER TABLE imports ADD COLUMN column_map_version_id uuid;
ALTER TABLE imports ADD CONSTRAINT imports_column_map FOREIGN KEY (lab_id, column_map_version_id)
  REFERENCES column_map_versions (lab_id, id) ON DELETE RESTRICT;
`);
}
