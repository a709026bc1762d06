import { ionisableGroupsOf, type IonisableGroup } from './ionisable-groups';
import { atomCounts, hillFormula, molarMassOf } from './molecular-formula';
import { loadLibrary, openMolecule } from './open-molecule';
import type { Molecule } from 'openchemlib';

/** What a structure says of a substance without any measurement. */
export interface Structure {
  /** Hill order: carbon, hydrogen, then by letter; deuterium as D. */
  readonly formula: string;
  /** Average molar mass in g/mol, of all parts together. */
  readonly molarMass: number;
  /** Mass of the most abundant isotopes (or those given) in u. */
  readonly monoisotopicMass: number;
  /** Predicted log P of the neutral molecule; null for salts, charged and inorganic structures, where it means nothing. */
  readonly predictedLogP: number | null;
  /** Sum of the charges as drawn. */
  readonly formalCharge: number;
  /** Charge of the largest part that no pH takes away: quaternary nitrogen and its like. */
  readonly permanentCharge: number;
  /** Separate parts: more than one in salts, hydrates and mixtures. */
  readonly parts: number;
  /** Groups that can gain or lose a proton, each kind once: where the library has no pKa of the kind, one is missing. */
  readonly ionisable: readonly IonisableGroup[];
  /** The same for every way to write one structure, with its stereochemistry. For comparing, not for reading. */
  readonly canonical: string;
  /** The same without stereochemistry: two isomers share it. */
  readonly canonicalFlat: string;
}

/** What predicts log P, for naming it beside the figure. */
export const predictor = 'predicted from the structure (openchemlib, sum of atom contributions)';

/** Elements whose cations keep their charge without a hydrogen to give away. */
const onium: ReadonlySet<number> = new Set([7, 8, 15, 16, 33, 34]);
const carbon = 6;

/**
 * Formula, masses, predicted log P, charges and a canonical form of a SMILES, by openchemlib.
 *
 * The structure is taken as written: other tautomers and other states of charge give another canonical form.
 * @throws ChemistryError `unreadable-structure` for what cannot be read as one or more molecules (at most 150 atoms)
 */
export async function readStructure(smiles: string): Promise<Structure> {
  const library = await loadLibrary();
  const molecule = openMolecule(library, smiles, 'flat');
  const { formula, relativeWeight, absoluteWeight } = molecule.getMolecularFormula();
  const counts = atomCounts(formula);
  const part = partsOf(molecule);
  const parts = Math.max(...part) + 1;
  const formalCharge = part.reduce((sum, _, atom) => sum + molecule.getAtomCharge(atom), 0);
  const permanentCharge = permanentChargeOf(molecule, part);
  const isPlain =
    parts === 1 &&
    formalCharge === 0 &&
    permanentCharge === 0 &&
    part.some((_, atom) => molecule.getAtomicNo(atom) === carbon);
  const predicted = isPlain ? logPOf(new library.MoleculeProperties(molecule).logP) : null;
  const ionisable = ionisableGroupsOf(molecule);
  const isLabelled = part.some(
    (_, atom) => molecule.getAtomicNo(atom) > 1 && molecule.getAtomMass(atom) !== 0
  );
  molecule.stripStereoInformation();
  const canonicalFlat = molecule.getIDCode();
  return {
    formula: hillFormula(counts),
    // The library rounds some weights (iodine to 126.9); it alone knows those of heavier isotopes.
    molarMass: (isLabelled ? null : molarMassOf(counts)) ?? relativeWeight,
    monoisotopicMass: absoluteWeight,
    predictedLogP: predicted,
    formalCharge,
    permanentCharge,
    parts,
    ionisable,
    canonical: stereoMarks.test(smiles) ? openMolecule(library, smiles, 'whole').getIDCode() : canonicalFlat,
    canonicalFlat
  };
}

/** Signs by which a SMILES tells stereochemistry; without them the whole form is the flat one. */
const stereoMarks = /[@/\\]/;

/** The library answers -999 where an atom has no contribution. */
const logPOf = (value: number): number | null => (value > -900 ? value : null);

/** For each atom the number of the part it belongs to. */
function partsOf(molecule: Molecule): readonly number[] {
  const part = new Array<number>(molecule.getAllAtoms()).fill(-1);
  let count = 0;
  for (let start = 0; start < part.length; start += 1) {
    if (part[start] !== -1) continue;
    const waiting = [start];
    while (waiting.length > 0) {
      const atom = waiting.pop()!;
      if (part[atom] !== -1) continue;
      part[atom] = count;
      for (let i = 0; i < molecule.getAllConnAtoms(atom); i += 1) waiting.push(molecule.getConnAtom(atom, i));
    }
    count += 1;
  }
  return part;
}

/**
 * A positive atom without a hydrogen that no neighbour's negative charge balances (as it is in nitro groups, N-oxides and
 * azides), summed over the part with most atoms.
 */
function permanentChargeOf(molecule: Molecule, part: readonly number[]): number {
  const sizes = new Map<number, number>();
  for (const index of part) sizes.set(index, (sizes.get(index) ?? 0) + 1);
  const largest = [...sizes].reduce((most, entry) => (entry[1] > most[1] ? entry : most))[0];
  return part.reduce((sum, index, atom) => {
    const charge = molecule.getAtomCharge(atom);
    const keeps =
      index === largest &&
      charge > 0 &&
      onium.has(molecule.getAtomicNo(atom)) &&
      molecule.getAllHydrogens(atom) === 0 &&
      !neighboursOf(molecule, atom).some((other) => molecule.getAtomCharge(other) < 0);
    return keeps ? sum + charge : sum;
  }, 0);
}

const neighboursOf = (molecule: Molecule, atom: number): readonly number[] =>
  Array.from({ length: molecule.getAllConnAtoms(atom) }, (_, i) => molecule.getConnAtom(atom, i));
