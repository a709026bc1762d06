import { ChemistryError, readStructure, type Structure } from '../../chemistry';

/** What a SMILES says, or why it says nothing. */
export type KnownStructure =
  { readonly read: true; readonly structure: Structure } | { readonly read: false; readonly problem: string };

/** Reading takes a millisecond and a panel has a hundred: what a text says never changes, so it is kept. */
const kept = new Map<string, KnownStructure>();
const most = 2000;

/** What a SMILES says; never throws for one that cannot be read. */
export async function knownStructure(smiles: string): Promise<KnownStructure> {
  const found = kept.get(smiles);
  if (found) return found;
  const answer = await readStructure(smiles).then(
    (structure): KnownStructure => ({ read: true, structure }),
    (error: unknown): KnownStructure => {
      if (error instanceof ChemistryError) return { read: false, problem: error.message };
      throw error;
    }
  );
  if (kept.size >= most) kept.clear();
  kept.set(smiles, answer);
  return answer;
}
