import type { QueryInterface } from 'sequelize';

/**
 * What an instrument says about a peak beside its area. A table of its own, so that the large one stays narrow and files without such
 * columns cost nothing: a row for each measurement that has any, found by its injection and analyte. No foreign keys, as for
 * the measurements: the import resolves and locks their parents first and copies the rows in.
 */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
CREATE TABLE measurement_qualifiers (
  lab_id uuid NOT NULL,
  study_id uuid NOT NULL,
  import_id uuid NOT NULL,
  injection_id uuid NOT NULL,
  analyte_id uuid NOT NULL,
  retention_time_min double precision,
  ion_ratio double precision,
  signal_to_noise double precision,
  -- The peak was integrated by hand, and why, where the file says.
  is_manual boolean NOT NULL,
  manual_cause text,
  PRIMARY KEY (lab_id, injection_id, analyte_id),
  CHECK (is_manual OR manual_cause IS NULL),
  CHECK (is_manual OR num_nonnulls(retention_time_min, ion_ratio, signal_to_noise) > 0)
);
CREATE INDEX measurement_qualifiers_import ON measurement_qualifiers (import_id);

CREATE TRIGGER measurement_qualifiers_immutable BEFORE UPDATE OR DELETE ON measurement_qualifiers
  FOR EACH ROW EXECUTE FUNCTION refuse_change();
CREATE TRIGGER measurement_qualifiers_no_truncate BEFORE TRUNCATE ON measurement_qualifiers
  FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
CREATE TRIGGER measurement_qualifiers_enter_with_import AFTER INSERT ON measurement_qualifiers
  REFERENCING NEW TABLE AS new_rows FOR EACH STATEMENT EXECUTE FUNCTION check_new_measurements();
`);
}
