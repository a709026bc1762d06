import type { Actor } from '../../domain/actor';
import { Lab } from '../db/models/lab';
import { audit, inTransaction } from '../db/transaction';
import { NotFound } from '../errors';
import { require } from './permissions';

/** Changes the name of the lab, as pages and exports show it from now on. */
export async function renameLab(actor: Actor, input: Readonly<{ name: string }>): Promise<void> {
  require(actor, 'lab.settings');
  await inTransaction(actor, {}, async (transaction) => {
    const lab = await Lab.findByPk(actor.labId, { lock: transaction.LOCK.UPDATE });
    if (!lab) throw new NotFound();
    const before = lab.name;
    if (before === input.name) return;
    await lab.update({ name: input.name });
    audit({
      action: 'changed',
      entity: 'lab',
      entityId: lab.id,
      sentence: `The lab is now called ${input.name} (before: ${before}).`,
      before: { name: before },
      after: { name: input.name }
    });
  });
}
