import { QueryTypes, UniqueConstraintError } from 'sequelize';
import type { AccessScope } from '../../domain/access-scopes';
import type { Actor } from '../../domain/actor';
import { isAllowed } from '../../domain/permissions';
import type { Role } from '../../domain/roles';
import type { AccessKeyForm } from '../../schemas/access-keys';
import type { AccessKeyState, AccessKeyView } from '../../views/access-keys';
import { createAccessKey, isAccessKeyShaped } from '../auth/access-key-text';
import { hashToken } from '../auth/tokens';
import { AccessKey } from '../db/models/access-key';
import { Membership } from '../db/models/membership';
import { sequelize } from '../db/sequelize';
import { audit, inTransaction } from '../db/transaction';
import { Conflict, Invalid, NotFound } from '../errors';
import { knownId } from './known-id';
import { require } from './permissions';

/** More keys than this in one hand are forgotten ones. */
const mostKeys = 20;

/** A key answers for a membership: one made before its person left and came back stays shut. */
const membershipOfKey = `LEFT JOIN memberships m
  ON m.lab_id = k.lab_id AND m.user_id = k.user_id AND m.created_at <= k.created_at`;

interface ListRow {
  readonly id: string;
  readonly name: string;
  readonly prefix: string;
  readonly scopes: readonly AccessScope[];
  readonly owner: string;
  readonly user_id: string;
  readonly state: AccessKeyState;
  readonly created_at: Date;
  readonly last_used_at: Date | null;
  readonly expires_at: Date | null;
  readonly revoked_at: Date | null;
  readonly revoked_by: string | null;
}

/** One's own keys, those that work first; a lab manager sees every key of the lab. */
export async function listAccessKeys(actor: Actor): Promise<readonly AccessKeyView[]> {
  require(actor, 'access-keys.own');
  const rows = await sequelize.query<ListRow>(
    `SELECT * FROM (
      SELECT k.id, k.name, k.prefix, k.scopes, u.name AS owner, k.user_id, k.created_at, k.last_used_at, k.expires_at,
          k.revoked_at, r.name AS revoked_by,
          CASE WHEN k.revoked_at IS NOT NULL THEN 'revoked' WHEN m.user_id IS NULL THEN 'left'
            WHEN k.expires_at <= now() THEN 'expired' ELSE 'open' END AS state
        FROM access_keys k JOIN users u ON u.id = k.user_id LEFT JOIN users r ON r.id = k.revoked_by ${membershipOfKey}
        WHERE k.lab_id = $1 AND ($2 OR k.user_id = $3)) listed
      ORDER BY state = 'open' DESC, user_id = $3 DESC, created_at DESC, id DESC`,
    {
      bind: [actor.labId, isAllowed(actor.role, 'access-keys.revoke-any'), actor.userId],
      type: QueryTypes.SELECT
    }
  );
  return rows.map((row) => ({
    id: row.id,
    name: row.name,
    prefix: row.prefix,
    scopes: row.scopes,
    owner: row.owner,
    isOwn: row.user_id === actor.userId,
    state: row.state,
    createdAt: row.created_at.toISOString(),
    lastUsedAt: row.last_used_at?.toISOString() ?? null,
    expiresAt: row.expires_at?.toISOString() ?? null,
    revokedAt: row.revoked_at?.toISOString() ?? null,
    revokedBy: row.revoked_by
  }));
}

/**
 * Makes a key for oneself.
 * @returns the whole key, which is told this once and kept nowhere
 * @throws Invalid at `name` for one in use, at `scopes` for what the role does not include; Conflict for too many
 */
export async function makeAccessKey(
  actor: Actor,
  input: AccessKeyForm
): Promise<Readonly<{ id: string; key: string }>> {
  require(actor, 'access-keys.own');
  if (input.scopes.includes('import') && !isAllowed(actor.role, 'data.enter')) {
    throw Invalid.at(
      'scopes',
      'Your role in this lab does not bring data in, so a key of yours cannot either.'
    );
  }
  const { key, prefix, hash } = createAccessKey();
  const now = new Date();
  try {
    return await inTransaction(actor, {}, async (transaction) => {
      // One at a time for a person, so that the count holds.
      await Membership.findOne({
        where: { labId: actor.labId, userId: actor.userId },
        lock: transaction.LOCK.UPDATE
      });
      const open = await AccessKey.count({
        where: { labId: actor.labId, userId: actor.userId, revokedAt: null }
      });
      if (open >= mostKeys) {
        throw new Conflict(`You have ${open} keys in this lab. Revoke those that no program uses any more.`);
      }
      const made = await AccessKey.create({
        labId: actor.labId,
        userId: actor.userId,
        name: input.name,
        prefix,
        secretHash: hash,
        scopes: input.scopes,
        expiresAt: input.days === null ? null : new Date(now.getTime() + input.days * 86_400_000),
        createdAt: now
      });
      audit({
        action: 'created',
        entity: 'access key',
        entityId: made.id,
        sentence: `${actor.name} made the access key ${input.name} (${prefix}).`,
        after: { name: input.name, prefix, scopes: input.scopes, expiresAt: made.expiresAt }
      });
      return { id: made.id, key };
    });
  } catch (error) {
    if (!(error instanceof UniqueConstraintError)) throw error;
    throw Invalid.at(
      'name',
      `You have a key called ${input.name} already. Revoke that one first, or choose another name.`,
      { found: input.name }
    );
  }
}

/** Ends a key from its next request on. Once revoked it stays so. @throws NotFound for somebody else's without the right to */
export async function revokeAccessKey(actor: Actor, keyId: string): Promise<void> {
  require(actor, 'access-keys.own');
  await inTransaction(actor, {}, async (transaction) => {
    const found = await AccessKey.findOne({
      where: {
        id: knownId(keyId),
        labId: actor.labId,
        ...(isAllowed(actor.role, 'access-keys.revoke-any') ? {} : { userId: actor.userId })
      },
      lock: transaction.LOCK.UPDATE
    });
    if (!found) throw new NotFound('There is no such access key in this lab.');
    if (found.revokedAt !== null) return;
    await found.update({ revokedAt: new Date(), revokedBy: actor.userId });
    audit({
      action: 'revoked',
      entity: 'access key',
      entityId: found.id,
      sentence: `The access key ${found.name} (${found.prefix}) is revoked.`,
      before: { name: found.name, prefix: found.prefix, scopes: found.scopes }
    });
  });
}

/** A key that works, and the member it acts as, with the role that holds now. */
export interface KeyHolder {
  readonly keyId: string;
  readonly scopes: readonly AccessScope[];
  readonly actor: Actor;
}

interface HolderRow {
  readonly keyId: string;
  readonly keyName: string;
  readonly scopes: readonly AccessScope[];
  readonly userId: string;
  readonly labId: string;
  readonly name: string;
  readonly email: string;
  readonly role: Role;
  readonly labName: string;
  readonly labIsDemo: boolean;
  readonly isUseOld: boolean;
}

/**
 * Whom a key acts as; null for one that was mistyped, has expired or is revoked, or whose person is no member any more: no
 * answer tells which. Notes the use, at most once a minute.
 */
export async function holderOfKey(key: string): Promise<KeyHolder | null> {
  if (!isAccessKeyShaped(key)) return null;
  const [row] = await sequelize.query<HolderRow>(
    `SELECT k.id AS "keyId", k.name AS "keyName", k.scopes, k.user_id AS "userId", k.lab_id AS "labId", u.name, u.email,
        m.role, l.name AS "labName", l.is_demo AS "labIsDemo",
        (k.last_used_at IS NULL OR k.last_used_at < now() - interval '1 minute') AS "isUseOld"
      FROM access_keys k JOIN users u ON u.id = k.user_id JOIN labs l ON l.id = k.lab_id ${membershipOfKey}
      WHERE k.secret_hash = $1 AND k.revoked_at IS NULL AND (k.expires_at IS NULL OR k.expires_at > now())
        AND m.user_id IS NOT NULL`,
    { bind: [hashToken(key)], type: QueryTypes.SELECT }
  );
  if (!row) return null;
  const { keyId, keyName, scopes, isUseOld, ...member } = row;
  if (isUseOld) {
    await sequelize.query(
      `UPDATE access_keys SET last_used_at = now()
        WHERE id = $1 AND revoked_at IS NULL AND (last_used_at IS NULL OR last_used_at < now() - interval '1 minute')`,
      { bind: [keyId] }
    );
  }
  return { keyId, scopes, actor: { ...member, accessKey: keyName } };
}
