import { expect, test } from 'vitest';
import { namesOfIds, withNames } from '../../../src/lib/server/services/history-names';
import { makeMember } from '../../factories/member';
import { makePanelEntry } from '../../factories/panel-entry';
import { makeStudy } from '../../factories/study';
import { makeVariant } from '../../factories/variant';

test('what an event points at is shown by name, in its own lab only', async () => {
  const actor = await makeMember();
  const made = await makeStudy(actor);
  const entry = await makePanelEntry(made.study, { name: 'Target' });
  const variant = await makeVariant(made.study, { code: 'B', name: 'Polymer' });
  const after = {
    entryId: entry.id,
    many: [{ variantId: variant.id }],
    actor: actor.userId,
    n: 3,
    none: null
  };
  const names = await namesOfIds(actor.labId, [after, null]);
  expect(withNames(after, names)).toEqual({
    entryId: 'Target',
    many: [{ variantId: 'B, Polymer' }],
    actor: actor.name,
    n: 3,
    none: null
  });
  const stranger = await makeMember();
  expect(withNames(after, await namesOfIds(stranger.labId, [after]))).toEqual(after);
});
