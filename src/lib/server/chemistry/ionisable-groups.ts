import type { Molecule } from 'openchemlib';

/** A group that can gain or lose a proton, as a structure shows it. */
export interface IonisableGroup {
  readonly name: string;
  readonly kind: 'acid' | 'base';
  /** `certain`: ionised in some water that is extracted; `possible`: it depends on the rest of the molecule. */
  readonly sureness: 'certain' | 'possible';
}

const [nitrogen, oxygen, phosphorus, sulfur, carbon] = [7, 8, 15, 16, 6];

/**
 * The ionisable groups that can be told from bonds alone, each kind once. It names groups and predicts no pKa: it is there to
 * notice that a pKa is missing. Amides, nitro groups, alcohols and thiols are left out.
 * @param molecule with ring information at hand
 */
export function ionisableGroupsOf(molecule: Molecule): readonly IonisableGroup[] {
  const found = new Map<string, IonisableGroup>();
  for (let atom = 0; atom < molecule.getAllAtoms(); atom += 1) {
    const element = molecule.getAtomicNo(atom);
    const group =
      element === oxygen ? acidAt(molecule, atom) : element === nitrogen ? nitrogenAt(molecule, atom) : null;
    if (group) found.set(group.name, group);
  }
  return [...found.values()];
}

const acid = (name: string): IonisableGroup => ({ name, kind: 'acid', sureness: 'certain' });
const base = (name: string, sureness: IonisableGroup['sureness'] = 'certain'): IonisableGroup => ({
  name,
  kind: 'base',
  sureness
});

interface Neighbour {
  readonly atom: number;
  readonly element: number;
  readonly order: number;
}

function neighbours(molecule: Molecule, atom: number): readonly Neighbour[] {
  return Array.from({ length: molecule.getAllConnAtoms(atom) }, (_, i) => {
    const other = molecule.getConnAtom(atom, i);
    return { atom: other, element: molecule.getAtomicNo(other), order: molecule.getConnBondOrder(atom, i) };
  }).filter(({ element }) => element > 1);
}

const doubleTo = (molecule: Molecule, atom: number, elements: readonly number[]): boolean =>
  neighbours(molecule, atom).some(({ element, order }) => order === 2 && elements.includes(element));

/** Oxygen that carries a proton, or has lost it as drawn. */
function acidAt(molecule: Molecule, atom: number): IonisableGroup | null {
  const [only, second] = neighbours(molecule, atom);
  if (!only || second || only.order !== 1) return null;
  if (molecule.getAllHydrogens(atom) === 0 && molecule.getAtomCharge(atom) >= 0) return null;
  if (only.element === carbon) {
    if (doubleTo(molecule, only.atom, [oxygen, sulfur])) return acid('carboxylic acid');
    return molecule.isAromaticAtom(only.atom) ? acid('phenol') : null;
  }
  if (only.element === phosphorus) return acid('acid of phosphorus');
  return only.element === sulfur && doubleTo(molecule, only.atom, [oxygen]) ? acid('sulfonic acid') : null;
}

function nitrogenAt(molecule: Molecule, atom: number): IonisableGroup | null {
  const around = neighbours(molecule, atom);
  const hydrogens = molecule.getAllHydrogens(atom);
  const charge = molecule.getAtomCharge(atom);
  if (charge > 0 && hydrogens === 0) return null;
  if (molecule.isAromaticAtom(atom))
    return hydrogens === 0 && around.length === 2 ? base('nitrogen in an aromatic ring', 'possible') : null;
  const withdraws = ({ atom: other, element }: Neighbour): boolean =>
    element !== carbon || doubleTo(molecule, other, [oxygen, sulfur]);
  // Amides, sulfonamides, nitrosamines, hydrazines: other laws.
  if (around.some(withdraws)) return null;
  if (around.some(({ order }) => order === 3)) return null;
  if (around.some(({ order }) => order === 2)) {
    const [imine] = around.filter(({ order }) => order === 2);
    const nitrogens = neighbours(molecule, imine!.atom).filter(({ element }) => element === nitrogen);
    return nitrogens.length > 1 ? base('amidine or guanidine') : base('imine', 'possible');
  }
  if (around.some(({ atom: other }) => molecule.isAromaticAtom(other)))
    return base('aromatic amine', 'possible');
  // Nitrogen beside a double bond: part of an amidine, which its other nitrogen tells, or an enamine.
  if (around.some(({ atom: other }) => doubleTo(molecule, other, [carbon, nitrogen]))) return null;
  return base('aliphatic amine');
}
