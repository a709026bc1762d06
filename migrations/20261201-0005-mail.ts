import type { QueryInterface } from 'sequelize';

/** Messages on their way out, and the local mailbox that stands in for a mail server. */
export async function up({ context }: { context: QueryInterface }): Promise<void> {
  await context.sequelize.query(`
CREATE TABLE outbox_messages (
  id uuid PRIMARY KEY,
  -- The lab it is about; null for what concerns a person alone.
  lab_id uuid REFERENCES labs (id) ON DELETE CASCADE,
  template text NOT NULL CHECK (template IN ('invitation', 'password reset')),
  recipient text NOT NULL CHECK (length(recipient) BETWEEN 3 AND 254),
  subject text NOT NULL,
  body_text text NOT NULL,
  body_html text NOT NULL,
  sent_at timestamptz,
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now(),
  -- A body holds a one-time link: it is emptied as soon as the message has left.
  CHECK (sent_at IS NULL OR (body_text = '' AND body_html = ''))
);

-- Filled by the local mail server only, which exists only while no real one is configured.
CREATE TABLE mailbox_messages (
  id uuid PRIMARY KEY,
  sender text NOT NULL,
  recipients text NOT NULL,
  subject text NOT NULL,
  body_text text NOT NULL,
  created_at timestamptz NOT NULL DEFAULT now(),
  updated_at timestamptz NOT NULL DEFAULT now()
);
CREATE INDEX mailbox_messages_newest ON mailbox_messages (created_at DESC);
`);
}
