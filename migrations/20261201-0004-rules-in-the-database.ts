import type { QueryInterface } from 'sequelize';

/** Immutable rows and frozen studies are refused by the database itself, not only by the services. */
const immutableTables = [
  'analyte_versions',
  'criteria_set_versions',
  'calibration_fits',
  'sequences',
  'extracts',
  'injections',
  'measurements'
];

const studyContentTables = [
  'study_stages',
  'panel_entries',
  'variants',
  'procedure_steps',
  'calibration_sets',
  'calibration_levels',
  'calibration_level_concentrations',
  'calibration_fits',
  'experiments',
  'stage_evidence',
  'experiment_spikes',
  'internal_standard_additions',
  'fractions',
  'replicates',
  'replicate_spikes',
  'imports',
  'sequences',
  'extracts',
  'injections',
  'exclusions'
];

export async function up({ context }: { context: QueryInterface }): Promise<void> {
  const run = (sql: string) => context.sequelize.query(sql);

  for (const table of immutableTables) {
    await run(`
CREATE TRIGGER ${table}_immutable BEFORE UPDATE OR DELETE ON ${table} FOR EACH ROW EXECUTE FUNCTION refuse_change();
CREATE TRIGGER ${table}_no_truncate BEFORE TRUNCATE ON ${table} FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();`);
  }

  await run(`
CREATE FUNCTION refuse_frozen_study() RETURNS trigger LANGUAGE plpgsql AS $$
DECLARE
  frozen text;
BEGIN
  -- Both ends of a move count: the study that a row leaves and the one that it enters.
  SELECT state INTO frozen FROM studies
    WHERE id IN (CASE WHEN TG_OP <> 'INSERT' THEN OLD.study_id END, CASE WHEN TG_OP <> 'DELETE' THEN NEW.study_id END)
      AND state IN ('in review', 'reviewed', 'signed') LIMIT 1;
  IF frozen IS NOT NULL THEN
    RAISE EXCEPTION 'the study is %: its content cannot change', frozen USING ERRCODE = 'restrict_violation';
  END IF;
  IF TG_OP = 'DELETE' THEN RETURN OLD; END IF;
  RETURN NEW;
END $$;`);
  for (const table of studyContentTables) {
    await run(`
CREATE TRIGGER ${table}_frozen BEFORE INSERT OR UPDATE OR DELETE ON ${table}
  FOR EACH ROW EXECUTE FUNCTION refuse_frozen_study();`);
  }

  await run(`
-- A study in review keeps its own content too; only its state, revision and clock may move.
CREATE FUNCTION refuse_frozen_study_content() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF OLD.state NOT IN ('in review', 'reviewed', 'signed') THEN
    IF TG_OP = 'DELETE' THEN RETURN OLD; END IF;
    RETURN NEW;
  END IF;
  IF TG_OP = 'DELETE' OR
     (NEW.id, NEW.lab_id, NEW.code, NEW.title, NEW.matrix, NEW.objective, NEW.sample_volume_ml, NEW.criteria_set_id,
      NEW.criteria_set_version_id, NEW.owner_id, NEW.data_version)
     IS DISTINCT FROM
     (OLD.id, OLD.lab_id, OLD.code, OLD.title, OLD.matrix, OLD.objective, OLD.sample_volume_ml, OLD.criteria_set_id,
      OLD.criteria_set_version_id, OLD.owner_id, OLD.data_version) THEN
    RAISE EXCEPTION 'the study is %: its content cannot change', OLD.state USING ERRCODE = 'restrict_violation';
  END IF;
  RETURN NEW;
END $$;
CREATE TRIGGER studies_frozen BEFORE UPDATE OR DELETE ON studies FOR EACH ROW EXECUTE FUNCTION refuse_frozen_study_content();

-- Measurements enter only with an import that is being stored, into a study that is open.
CREATE FUNCTION check_new_measurements() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF EXISTS (
    SELECT 1 FROM (SELECT DISTINCT lab_id, import_id FROM new_rows) AS n
    LEFT JOIN imports i ON i.id = n.import_id AND i.lab_id = n.lab_id
    LEFT JOIN studies s ON s.id = i.study_id
    WHERE i.id IS NULL OR i.state <> 'received' OR s.state NOT IN ('draft', 'returned')
  ) THEN
    RAISE EXCEPTION 'measurements belong to an import that is being stored in an open study'
      USING ERRCODE = 'restrict_violation';
  END IF;
  RETURN NULL;
END $$;
CREATE TRIGGER measurements_enter_with_import AFTER INSERT ON measurements
  REFERENCING NEW TABLE AS new_rows FOR EACH STATEMENT EXECUTE FUNCTION check_new_measurements();

-- The bytes of an import, and what has once been stored, stay as they are.
CREATE FUNCTION keep_import_bytes() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF TG_OP = 'DELETE' THEN
    RAISE EXCEPTION 'imports are withdrawn, never deleted' USING ERRCODE = 'restrict_violation';
  END IF;
  IF (NEW.sha256, NEW.byte_size, NEW.file_name, NEW.received_by) IS DISTINCT FROM
     (OLD.sha256, OLD.byte_size, OLD.file_name, OLD.received_by) OR NEW.file_bytes IS DISTINCT FROM OLD.file_bytes THEN
    RAISE EXCEPTION 'the file of an import is kept byte for byte' USING ERRCODE = 'restrict_violation';
  END IF;
  RETURN NEW;
END $$;
CREATE TRIGGER imports_keep_bytes BEFORE UPDATE OR DELETE ON imports FOR EACH ROW EXECUTE FUNCTION keep_import_bytes();

-- An exclusion is lifted, never deleted or reworded.
CREATE FUNCTION keep_exclusion() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF TG_OP = 'DELETE' OR OLD.lifted_at IS NOT NULL OR
     (NEW.replicate_id, NEW.fraction_id, NEW.analyte_id, NEW.cause, NEW.excluded_by, NEW.excluded_at) IS DISTINCT FROM
     (OLD.replicate_id, OLD.fraction_id, OLD.analyte_id, OLD.cause, OLD.excluded_by, OLD.excluded_at) THEN
    RAISE EXCEPTION 'an exclusion is lifted, never changed or deleted' USING ERRCODE = 'restrict_violation';
  END IF;
  RETURN NEW;
END $$;
CREATE TRIGGER exclusions_kept BEFORE UPDATE OR DELETE ON exclusions FOR EACH ROW EXECUTE FUNCTION keep_exclusion();
`);
}
