import type { Actor } from '../../domain/actor';
import type { AnalytePreviewForm } from '../../schemas/analyte';
import type { AnalytePreview, AnalyteVersionView } from '../../views/library';
import type { SubstanceView } from '../../views/panel-chemistry';
import { Invalid } from '../errors';
import { knownStructure } from './chemistry/known-structure';
import { readSubstance } from './chemistry/read-substance';
import { structureView } from './chemistry/structure-view';
import { substanceView } from './chemistry/substance-view';
import { likenesses } from './library-likeness';
import { currentAnalytes } from './library-rows';
import { require } from './permissions';

/** Acidified, as it is, and made alkaline: where published methods load. */
const usualPhs = [2, 7, 10] as const;

/** What the chemistry says of a version of an analyte of the library. */
export async function analyteChemistry(actor: Actor, version: AnalyteVersionView): Promise<SubstanceView> {
  require(actor, 'studies.see');
  return substanceView(version, await readSubstance(version, version.id), usualPhs);
}

/** @throws Invalid at `smiles` for one that cannot be read, with what would be right */
export async function requireReadable(smiles: string): Promise<void> {
  const known = smiles === '' ? null : await knownStructure(smiles);
  if (known && !known.read) {
    throw Invalid.at(
      'smiles',
      `${known.problem} Write it like CC(=O)Oc1ccccc1C(O)=O, or leave the field empty.`
    );
  }
}

/**
 * What a form says of an analyte before it is stored: its structure beside what is typed, and who in the library may be the same.
 * @param ownId the analyte that is changed; null for a new one
 * @throws Invalid for a structure that cannot be read
 */
export async function previewAnalyte(
  actor: Actor,
  form: AnalytePreviewForm,
  ownId: string | null
): Promise<AnalytePreview> {
  require(actor, 'library.edit');
  await requireReadable(form.smiles);
  const others = (await currentAnalytes(actor.labId)).filter(({ id }) => id !== ownId);
  return {
    structure: await structureView({
      name: form.name || 'the analyte',
      smiles: form.smiles || null,
      formula: form.formula || null,
      molarMass: form.molarMass,
      logKow: form.logKow,
      sources: {}
    }),
    alike: await likenesses(form, others)
  };
}
