import { ChemistryError } from './errors';
import type { Molecule } from 'openchemlib';

type Library = typeof import('openchemlib');

/** The structure library is a megabyte of code: it is loaded when the first structure is asked for and not at start. */
export const loadLibrary = (): Promise<Library> => import('openchemlib');

/** What a stored structure may be long, and atoms beyond which drawing takes a noticeable part of a second. */
const longest = 2000;
const mostAtoms = 150;

const unreadable = (smiles: string, why: string): ChemistryError => {
  const shown = smiles.length > 60 ? `${smiles.slice(0, 57)}…` : smiles;
  return new ChemistryError('unreadable-structure', `'${shown}' cannot be read as SMILES: ${why}.`);
};

/** With stereochemistry and coordinates for drawing and comparing; without them reading is far quicker. */
export type Detail = 'whole' | 'flat';

/**
 * The molecule that a SMILES describes, with rings and aromatic atoms found.
 * @throws ChemistryError `unreadable-structure` with what is wrong and where: no text, white space, unknown atoms, open rings
 * and branches, placeholders, too many bonds at an atom, unpaired electrons, more than 150 atoms
 */
export function openMolecule({ Molecule: Molecules }: Library, typed: string, detail: Detail): Molecule {
  const smiles = typeof typed === 'string' ? typed.trim() : '';
  if (smiles === '') throw unreadable('', 'there is no text');
  if (smiles.length > longest)
    throw unreadable(smiles, `it has ${smiles.length} characters, at most ${longest}`);
  const space = smiles.search(/\s/);
  if (space >= 0)
    throw unreadable(smiles, `there is a space at position ${space + 1}; give the structure alone`);
  const cut = cutShort(smiles);
  if (cut) throw unreadable(smiles, cut);
  const molecule = parsed(Molecules, smiles, detail);
  const atoms = molecule.getAllAtoms();
  if (atoms === 0) throw unreadable(smiles, 'it has no atoms');
  if (atoms > mostAtoms) throw unreadable(smiles, `it has ${atoms} atoms, at most ${mostAtoms}`);
  if (molecule.isFragment()) throw unreadable(smiles, 'it holds a placeholder or a bond of any kind');
  molecule.ensureHelperArrays(Molecules.cHelperRings);
  for (let atom = 0; atom < atoms; atom += 1) {
    const label = molecule.getAtomLabel(atom);
    if (molecule.getOccupiedValence(atom) > molecule.getMaxValence(atom)) {
      throw unreadable(smiles, `atom ${atom + 1} (${label}) has more bonds than it can have`);
    }
    if (molecule.getAtomRadical(atom) !== 0) {
      throw unreadable(
        smiles,
        `atom ${atom + 1} (${label}) is left with an unpaired electron (is a hydrogen or a charge missing?)`
      );
    }
  }
  return molecule;
}

/** A text that ends too early is another, smaller molecule to the library. */
function cutShort(smiles: string): string | null {
  const count = (sign: string) => smiles.split(sign).length - 1;
  const open = count('(') - count(')');
  if (open > 0)
    return `${open === 1 ? 'a branch is' : `${open} branches are`} opened by '(' and never closed`;
  const ring = smiles.replace(/\[[^\]]*\]/g, '').search(/%(?!\d\d)/);
  return ring >= 0 ? "two digits of a ring number must follow '%'" : null;
}

function parsed(Molecules: Library['Molecule'], smiles: string, detail: Detail): Molecule {
  const flat = detail === 'flat';
  try {
    return Molecules.fromSmiles(smiles, { noCoordinates: flat, noStereo: flat });
  } catch (error) {
    const said = error instanceof Error ? error.message : '';
    throw unreadable(
      smiles,
      said.replace(/^.*?SmilesParser:\s*/, '').replace(/\.$/, '') || 'its grammar is broken'
    );
  }
}
