import type { Actor } from '../../domain/actor';
import type { SequenceItem, SequenceView } from '../../views/sequences';
import { NotFound } from '../errors';
import { figuresOfStudy } from './figures/figures-cache';
import { require } from './permissions';
import { sequenceItem } from './figures/sequence-items';
import { sequenceView } from './figures/sequence-view';

/** The runs that stored files of a study brought, by time. @throws NotFound */
export async function listSequences(actor: Actor, code: string): Promise<readonly SequenceItem[]> {
  require(actor, 'studies.see');
  const figures = await figuresOfStudy(actor.labId, code);
  return figures.checks().runs.map((findings) => sequenceItem(figures, findings));
}

/** One run: what was injected in which order, what its checks say, and what they flag. @throws NotFound */
export async function getSequence(actor: Actor, code: string, sequenceId: string): Promise<SequenceView> {
  require(actor, 'studies.see');
  const figures = await figuresOfStudy(actor.labId, code);
  const findings = figures.checks().runs.find(({ run }) => run.sequences.some(({ id }) => id === sequenceId));
  if (!findings) throw new NotFound();
  return sequenceView(figures, findings);
}
