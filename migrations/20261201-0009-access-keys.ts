import type { QueryInterface } from 'sequelize';

/** Access keys for programs: each acts as the member who made it, in one lab, within its scopes. */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
CREATE TABLE access_keys (
  id uuid PRIMARY KEY,
  lab_id uuid NOT NULL REFERENCES labs (id) ON DELETE RESTRICT,
  user_id uuid NOT NULL REFERENCES users (id) ON DELETE RESTRICT,
  name text NOT NULL CHECK (length(name) BETWEEN 1 AND 80),
  -- The beginning of the key, by which people tell one from another.
  prefix text NOT NULL CHECK (length(prefix) BETWEEN 4 AND 20),
  -- SHA-256 of the whole key; the key itself is shown once and kept nowhere.
  secret_hash text NOT NULL UNIQUE CHECK (secret_hash ~ '^[0-9a-f]{64}$'),
  scopes text[] NOT NULL CHECK (cardinality(scopes) > 0 AND scopes <@ ARRAY['read', 'import']),
  expires_at timestamptz,
  last_used_at timestamptz,
  revoked_by uuid REFERENCES users (id) ON DELETE RESTRICT,
  revoked_at timestamptz,
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  UNIQUE (lab_id, id),
  CHECK ((revoked_at IS NULL) = (revoked_by IS NULL)),
  CHECK (expires_at > created_at)
);
-- A form that is sent twice makes one key.
CREATE UNIQUE INDEX access_keys_name ON access_keys (lab_id, user_id, lower(name)) WHERE revoked_at IS NULL;

-- What a key is good for is settled when it is made; it is revoked for good, and never deleted.
CREATE FUNCTION keep_access_key() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
  IF TG_OP = 'DELETE' OR OLD.revoked_at IS NOT NULL OR
     (NEW.id, NEW.lab_id, NEW.user_id, NEW.name, NEW.prefix, NEW.secret_hash, NEW.scopes, NEW.expires_at, NEW.created_at)
     IS DISTINCT FROM
     (OLD.id, OLD.lab_id, OLD.user_id, OLD.name, OLD.prefix, OLD.secret_hash, OLD.scopes, OLD.expires_at, OLD.created_at) THEN
    RAISE EXCEPTION 'an access key is revoked, never changed or deleted' USING ERRCODE = 'restrict_violation';
  END IF;
  RETURN NEW;
END $$;
CREATE TRIGGER access_keys_kept BEFORE UPDATE OR DELETE ON access_keys FOR EACH ROW EXECUTE FUNCTION keep_access_key();
`);
}
