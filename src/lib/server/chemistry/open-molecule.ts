import { possibleBonds } from './bond-counts';
import { ChemistryError } from './errors';
import { brokenGrammar } from './smiles-grammar';
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
  const broken = brokenGrammar(smiles);
  if (broken) throw unreadable(smiles, broken);
  // Flat first: a structure that is refused costs no drawing.
  const molecule = parsed(Molecules, smiles, 'flat');
  const atoms = molecule.getAllAtoms();
  if (atoms === 0) throw unreadable(smiles, 'it has no atoms');
  if (atoms > mostAtoms) throw unreadable(smiles, `it has ${atoms} atoms, at most ${mostAtoms}`);
  if (molecule.isFragment()) throw unreadable(smiles, 'it holds a placeholder or a bond of any kind');
  molecule.ensureHelperArrays(Molecules.cHelperRings);
  for (let atom = 0; atom < atoms; atom += 1) {
    const odd = oddAtom(molecule, atom);
    if (odd) throw unreadable(smiles, `atom ${atom + 1} (${molecule.getAtomLabel(atom)}) ${odd}`);
  }
  if (detail === 'flat') return molecule;
  const whole = parsed(Molecules, smiles, 'whole');
  whole.ensureHelperArrays(Molecules.cHelperRings);
  return whole;
}

/** What an atom cannot be, where it is that. */
function oddAtom(molecule: Molecule, atom: number): string | null {
  if (molecule.getAtomRadical(atom) !== 0) {
    return 'is left with an unpaired electron (is a hydrogen or a charge missing?)';
  }
  const bonds = molecule.getOccupiedValence(atom) + molecule.getImplicitHydrogens(atom);
  const possible = possibleBonds(molecule.getAtomicNo(atom), molecule.getAtomCharge(atom));
  const most = possible ? Math.max(...possible) : molecule.getMaxValence(atom);
  if (bonds > most) return 'has more bonds than it can have';
  return possible && !possible.includes(bonds)
    ? 'has fewer bonds than it needs (is a hydrogen or a charge missing?)'
    : null;
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
