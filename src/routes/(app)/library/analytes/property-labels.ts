import type { SourcedProperty } from '$lib/schemas/analyte';

/** Properties whose values carry a source, as forms and pages name them. */
export const propertyLabels: Readonly<
  Record<SourcedProperty, { readonly label: string; readonly unit: string | null }>
> = {
  smiles: { label: 'SMILES', unit: null },
  formula: { label: 'Formula', unit: null },
  molarMass: { label: 'Molar mass', unit: 'g/mol' },
  logKow: { label: 'log Kow', unit: null },
  pkaAcid: { label: 'pKa, acid groups', unit: null },
  pkaBase: { label: 'pKa, base groups', unit: null },
  boilingPointC: { label: 'Boiling point', unit: '°C' },
  vapourPressurePa: { label: 'Vapour pressure', unit: 'Pa' },
  henryPaM3Mol: { label: 'Henry constant', unit: 'Pa m³/mol' },
  waterSolubilityMgL: { label: 'Solubility in water', unit: 'mg/L' }
};
