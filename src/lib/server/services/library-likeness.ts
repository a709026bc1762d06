import { nameKey } from '../../domain/name-key';
import type { AnalyteForm } from '../../schemas/analyte';
import type { LikenessView } from '../../views/library';
import type { Problem } from '../errors';
import { knownStructure } from './chemistry/known-structure';
import { listed } from './changes';
import type { NamedAnalyte } from './library-rows';

/** What tells an analyte from the others of a library. */
export type Identity = Pick<AnalyteForm, 'name' | 'cas' | 'smiles'>;

async function formsOf(smiles: string | null): Promise<{ exact: string; flat: string } | null> {
  const known = smiles ? await knownStructure(smiles) : null;
  return known?.read ? { exact: known.structure.canonical, flat: known.structure.canonicalFlat } : null;
}

/**
 * Analytes of the library that may be the same substance: by a name or synonym (as pasted lists fold them), by CAS number, by
 * structure (however the SMILES is written, isotopes and stereochemistry counted), or by structure without its stereochemistry.
 * This is the one rule for what counts as twice the same.
 * @param others current versions of the other analytes
 */
export async function likenesses(
  identity: Identity,
  others: readonly NamedAnalyte[]
): Promise<readonly LikenessView[]> {
  const key = nameKey(identity.name);
  const own = await formsOf(identity.smiles || null);
  const found: LikenessView[] = [];
  for (const { id, name, synonyms, cas, smiles } of others) {
    const note = (by: LikenessView['by']) => found.push({ id, name, by });
    if (key !== '' && [name, ...synonyms].some((text) => nameKey(text) === key)) note('name');
    if (identity.cas !== null && cas === identity.cas) note('CAS number');
    const theirs = own && (await formsOf(smiles));
    if (own && theirs && own.exact === theirs.exact) note('structure');
    else if (own && theirs && own.flat === theirs.flat) note('stereochemistry');
  }
  return found;
}

/**
 * What keeps an analyte out of the library: two of one name or CAS number could not be told apart in a data file, and one structure
 * twice is a mistake unless somebody says that it is meant (`sameStructure`). Stereochemistry keeps nobody out.
 */
export function likenessProblems(found: readonly LikenessView[], sameStructure: boolean): readonly Problem[] {
  const names = (by: LikenessView['by']) => found.filter((one) => one.by === by).map(({ name }) => name);
  const problem = (
    path: string,
    by: LikenessView['by'],
    says: (who: string) => string
  ): readonly Problem[] => (names(by).length === 0 ? [] : [{ path, message: says(listed(names(by))) }]);
  return [
    ...problem('name', 'name', (who) => `${who} in the library goes by this name.`),
    ...problem('cas', 'CAS number', (who) => `${who} in the library has this CAS number.`),
    ...(sameStructure
      ? []
      : problem(
          'sameStructure',
          'structure',
          (who) => `${who} in the library has this structure. Tick this if both are to stand there.`
        ))
  ];
}
