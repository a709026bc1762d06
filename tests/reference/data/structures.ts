/**
 * Structures with formula and molar mass as RDKit, another toolkit, computes them, and log Kow measured (experimental set of EPA/SRC
 * KOWWIN with the literature it names); null where no measured value was seen.
 */
export const structures: readonly {
  readonly name: string;
  readonly smiles: string;
  readonly formula: string;
  readonly molarMass: number;
  readonly logKow: number | null;
}[] = [
  { name: 'Metformin', smiles: 'CN(C)C(=N)NC(N)=N', formula: 'C4H11N5', molarMass: 129.17, logKow: null },
  {
    name: 'Carbamazepine',
    smiles: 'NC(=O)N1c2ccccc2C=Cc2ccccc12',
    formula: 'C15H12N2O',
    molarMass: 236.27,
    logKow: 2.45
  },
  {
    name: 'Diclofenac',
    smiles: 'OC(=O)Cc1ccccc1Nc1c(Cl)cccc1Cl',
    formula: 'C14H11Cl2NO2',
    molarMass: 296.15,
    logKow: 4.51
  },
  {
    name: 'Ibuprofen',
    smiles: 'CC(C)Cc1ccc(cc1)C(C)C(O)=O',
    formula: 'C13H18O2',
    molarMass: 206.28,
    logKow: 3.97
  },
  {
    name: 'Naproxen',
    smiles: 'COc1ccc2cc(ccc2c1)C(C)C(O)=O',
    formula: 'C14H14O3',
    molarMass: 230.26,
    logKow: 3.18
  },
  {
    name: 'Atenolol',
    smiles: 'CC(C)NCC(O)COc1ccc(CC(N)=O)cc1',
    formula: 'C14H22N2O3',
    molarMass: 266.34,
    logKow: 0.16
  },
  {
    name: 'Propranolol',
    smiles: 'CC(C)NCC(O)COc1cccc2ccccc12',
    formula: 'C16H21NO2',
    molarMass: 259.35,
    logKow: 3.48
  },
  {
    name: 'Metoprolol',
    smiles: 'COCCc1ccc(OCC(O)CNC(C)C)cc1',
    formula: 'C15H25NO3',
    molarMass: 267.37,
    logKow: 1.88
  },
  {
    name: 'Sulfamethoxazole',
    smiles: 'Cc1cc(NS(=O)(=O)c2ccc(N)cc2)no1',
    formula: 'C10H11N3O3S',
    molarMass: 253.28,
    logKow: 0.89
  },
  {
    name: 'Trimethoprim',
    smiles: 'COc1cc(Cc2cnc(N)nc2N)cc(OC)c1OC',
    formula: 'C14H18N4O3',
    molarMass: 290.32,
    logKow: 0.91
  },
  {
    name: 'Caffeine',
    smiles: 'Cn1cnc2n(C)c(=O)n(C)c(=O)c12',
    formula: 'C8H10N4O2',
    molarMass: 194.19,
    logKow: -0.07
  },
  {
    name: 'Paracetamol (acetaminophen)',
    smiles: 'CC(=O)Nc1ccc(O)cc1',
    formula: 'C8H9NO2',
    molarMass: 151.16,
    logKow: 0.46
  },
  {
    name: 'Gemfibrozil',
    smiles: 'Cc1ccc(C)c(OCCCC(C)(C)C(O)=O)c1',
    formula: 'C15H22O3',
    molarMass: 250.34,
    logKow: null
  },
  {
    name: 'Triclosan',
    smiles: 'Oc1cc(Cl)ccc1Oc1ccc(Cl)cc1Cl',
    formula: 'C12H7Cl3O2',
    molarMass: 289.54,
    logKow: 4.76
  },
  {
    name: '1H-Benzotriazole',
    smiles: 'c1ccc2[nH]nnc2c1',
    formula: 'C6H5N3',
    molarMass: 119.13,
    logKow: 1.44
  },
  { name: 'Gabapentin', smiles: 'NCC1(CC(O)=O)CCCCC1', formula: 'C9H17NO2', molarMass: 171.24, logKow: -1.1 },
  {
    name: 'Iopromide',
    smiles: 'COCC(=O)Nc1c(I)c(C(=O)NCC(O)CO)c(I)c(C(=O)N(C)CC(O)CO)c1I',
    formula: 'C18H24I3N3O8',
    molarMass: 791.12,
    logKow: -2.05
  },
  {
    name: 'Estrone',
    smiles: 'CC12CCC3c4ccc(O)cc4CCC3C1CCC2=O',
    formula: 'C18H22O2',
    molarMass: 270.37,
    logKow: 3.13
  },
  {
    name: '17a-Ethinylestradiol',
    smiles: 'CC12CCC3c4ccc(O)cc4CCC3C1CCC2(O)C#C',
    formula: 'C20H24O2',
    molarMass: 296.41,
    logKow: 3.67
  },
  { name: 'Phenol', smiles: 'Oc1ccccc1', formula: 'C6H6O', molarMass: 94.11, logKow: 1.46 },
  {
    name: '2,4-Dichlorophenol',
    smiles: 'Oc1ccc(Cl)cc1Cl',
    formula: 'C6H4Cl2O',
    molarMass: 163.0,
    logKow: 3.06
  },
  {
    name: 'Pentachlorophenol',
    smiles: 'Oc1c(Cl)c(Cl)c(Cl)c(Cl)c1Cl',
    formula: 'C6HCl5O',
    molarMass: 266.34,
    logKow: 5.12
  },
  {
    name: '4-Nitrophenol',
    smiles: 'Oc1ccc(cc1)[N+](=O)[O-]',
    formula: 'C6H5NO3',
    molarMass: 139.11,
    logKow: 1.91
  },
  { name: 'Aniline', smiles: 'Nc1ccccc1', formula: 'C6H7N', molarMass: 93.13, logKow: 0.9 },
  { name: '4-Chloroaniline', smiles: 'Nc1ccc(Cl)cc1', formula: 'C6H6ClN', molarMass: 127.57, logKow: 1.83 },
  {
    name: 'Benzidine',
    smiles: 'Nc1ccc(cc1)c1ccc(N)cc1',
    formula: 'C12H12N2',
    molarMass: 184.24,
    logKow: 1.34
  },
  { name: 'Pyridine', smiles: 'c1ccncc1', formula: 'C5H5N', molarMass: 79.1, logKow: 0.65 },
  { name: 'Naphthalene', smiles: 'c1ccc2ccccc2c1', formula: 'C10H8', molarMass: 128.17, logKow: 3.3 },
  {
    name: 'Phenanthrene',
    smiles: 'c1ccc2c(c1)ccc1ccccc12',
    formula: 'C14H10',
    molarMass: 178.23,
    logKow: 4.46
  },
  {
    name: 'Benzo[a]pyrene',
    smiles: 'c1ccc2c(c1)cc1ccc3cccc4ccc2c1c34',
    formula: 'C20H12',
    molarMass: 252.32,
    logKow: 6.13
  },
  {
    name: 'N-Nitrosodimethylamine (NDMA)',
    smiles: 'CN(C)N=O',
    formula: 'C2H6N2O',
    molarMass: 74.08,
    logKow: -0.57
  },
  {
    name: 'Atrazine',
    smiles: 'CCNc1nc(Cl)nc(NC(C)C)n1',
    formula: 'C8H14ClN5',
    molarMass: 215.69,
    logKow: 2.61
  },
  {
    name: 'Desethylatrazine',
    smiles: 'CC(C)Nc1nc(N)nc(Cl)n1',
    formula: 'C6H10ClN5',
    molarMass: 187.63,
    logKow: 1.51
  },
  {
    name: 'Diuron',
    smiles: 'CN(C)C(=O)Nc1ccc(Cl)c(Cl)c1',
    formula: 'C9H10Cl2N2O',
    molarMass: 233.1,
    logKow: 2.68
  },
  { name: '2,4-D', smiles: 'OC(=O)COc1ccc(Cl)cc1Cl', formula: 'C8H6Cl2O3', molarMass: 221.04, logKow: 2.81 },
  {
    name: 'Mecoprop',
    smiles: 'CC(Oc1ccc(Cl)cc1C)C(O)=O',
    formula: 'C10H11ClO3',
    molarMass: 214.65,
    logKow: 3.13
  },
  { name: 'Glyphosate', smiles: 'OC(=O)CNCP(O)(O)=O', formula: 'C3H8NO5P', molarMass: 169.07, logKow: -4.0 },
  {
    name: 'Metolachlor',
    smiles: 'CCc1cccc(C)c1N(C(C)COC)C(=O)CCl',
    formula: 'C15H22ClNO2',
    molarMass: 283.8,
    logKow: 3.13
  },
  {
    name: 'Chlorpyrifos',
    smiles: 'CCOP(=S)(OCC)Oc1nc(Cl)c(Cl)cc1Cl',
    formula: 'C9H11Cl3NO3PS',
    molarMass: 350.59,
    logKow: 4.96
  },
  {
    name: 'Dimethoate',
    smiles: 'CNC(=O)CSP(=S)(OC)OC',
    formula: 'C5H12NO3PS2',
    molarMass: 229.26,
    logKow: 0.78
  },
  {
    name: 'Bisphenol A',
    smiles: 'CC(C)(c1ccc(O)cc1)c1ccc(O)cc1',
    formula: 'C15H16O2',
    molarMass: 228.29,
    logKow: 3.32
  },
  {
    name: '4-Nonylphenol (linear)',
    smiles: 'CCCCCCCCCc1ccc(O)cc1',
    formula: 'C15H24O',
    molarMass: 220.36,
    logKow: 5.76
  }
];
