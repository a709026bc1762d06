import type { LibraryAnalyte } from './sourced';

/**
 * Labelled analogues and substances that do not occur in natural water, for use as surrogates and internal standards.
 *
 * Their properties are not looked up: a label hardly changes partition, so a chemist who needs them reads those of
 * the unlabelled compound. CAS numbers that were not certain are left out.
 */
export const labelledStandards: readonly LibraryAnalyte[] = [
  labelled(
    'Atrazine-d5',
    '163165-75-1',
    '[2H]C([2H])([2H])C([2H])([2H])Nc1nc(Cl)nc(NC(C)C)n1',
    'C8H9D5ClN5',
    220.71
  ),
  labelled(
    'Caffeine-d9',
    '72238-85-8',
    '[2H]C([2H])([2H])n1cnc2n(C([2H])([2H])[2H])c(=O)n(C([2H])([2H])[2H])c(=O)c12',
    'C8HD9N4O2',
    203.25
  ),
  labelled(
    'Carbamazepine-d10',
    '132183-78-9',
    'NC(=O)N1c2c([2H])c([2H])c([2H])c([2H])c2C([2H])=C([2H])c2c([2H])c([2H])c([2H])c([2H])c12',
    'C15H2D10N2O',
    246.33
  ),
  labelled('2,4-Dichlorophenol-d3', '93951-74-7', 'Oc1c([2H])c([2H])c(Cl)c([2H])c1Cl', 'C6HD3Cl2O', 166.02),
  labelled('Ibuprofen-d3', '121662-14-4', 'CC(C)Cc1ccc(cc1)C(C([2H])([2H])[2H])C(O)=O', 'C13H15D3O2', 209.3),
  labelled(
    'Naphthalene-d8',
    '1146-65-2',
    '[2H]c1c([2H])c([2H])c2c([2H])c([2H])c([2H])c([2H])c2c1[2H]',
    'C10D8',
    136.22
  ),
  labelled(
    'Nitrobenzene-d5',
    '4165-60-0',
    '[2H]c1c([2H])c([2H])c(c([2H])c1[2H])[N+](=O)[O-]',
    'C6D5NO2',
    128.14
  ),
  labelled(
    'N-Nitrosodimethylamine-d6',
    '17829-05-9',
    '[2H]C([2H])([2H])N(N=O)C([2H])([2H])[2H]',
    'C2D6N2O',
    80.12
  ),
  labelled(
    'Phenanthrene-d10',
    '1517-22-2',
    '[2H]c1c([2H])c([2H])c2c(c1[2H])c([2H])c([2H])c1c([2H])c([2H])c([2H])c([2H])c12',
    'C14D10',
    188.29
  ),
  labelled('Phenol-d6', '13127-88-3', '[2H]Oc1c([2H])c([2H])c([2H])c([2H])c1[2H]', 'C6D6O', 100.15),
  labelled(
    'Propranolol-d7',
    '98897-23-5',
    'CC(C)NCC(O)COc1c([2H])c([2H])c([2H])c2c([2H])c([2H])c([2H])c([2H])c12',
    'C16H14D7NO2',
    266.39
  ),
  labelled(
    'p-Terphenyl-d14',
    '1718-51-0',
    '[2H]c1c([2H])c([2H])c(c([2H])c1[2H])c1c([2H])c([2H])c(c([2H])c1[2H])c1c([2H])c([2H])c([2H])c([2H])c1[2H]',
    'C18D14',
    244.39
  ),
  uncommon('2-Fluorobiphenyl', '321-60-8', 'Fc1ccccc1c1ccccc1', 'C12H9F', 172.2),
  uncommon('2-Fluorophenol', '367-12-4', 'Oc1ccccc1F', 'C6H5FO', 112.1),
  uncommon('1,3-Dimethyl-2-nitrobenzene', '81-20-9', 'Cc1cccc(C)c1[N+](=O)[O-]', 'C8H9NO2', 151.16),
  uncommon('2,4,6-Tribromophenol', '118-79-6', 'Oc1c(Br)cc(Br)cc1Br', 'C6H3Br3O', 330.8)
];

function labelled(
  name: string,
  cas: string | null,
  smiles: string,
  formula: string,
  molarMass: number
): LibraryAnalyte {
  return { name, synonyms: [], cas, smiles, formula, molarMass, class: 'labelled standard' };
}

function uncommon(
  name: string,
  cas: string | null,
  smiles: string,
  formula: string,
  molarMass: number
): LibraryAnalyte {
  return { name, synonyms: [], cas, smiles, formula, molarMass, class: 'uncommon in water' };
}
