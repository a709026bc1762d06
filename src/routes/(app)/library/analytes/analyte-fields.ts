import type { AnalyteVersionView } from '$lib/views/library';

const text = (value: string | number | null): string => String(value ?? '');

/** A version of an analyte as the fields of its form. */
export function analyteFields(version: AnalyteVersionView): Record<string, string> {
  const sources = Object.entries(version.sources).map(([name, source]) => [`sources.${name}`, source]);
  return {
    name: version.name,
    cas: text(version.cas),
    class: text(version.class),
    synonyms: version.synonyms.join('\n'),
    smiles: text(version.smiles),
    formula: text(version.formula),
    molarMass: text(version.molarMass),
    logKow: text(version.logKow),
    pkaAcid: version.pkaAcid.join('; '),
    pkaBase: version.pkaBase.join('; '),
    boilingPointC: text(version.boilingPointC),
    vapourPressurePa: text(version.vapourPressurePa),
    henryPaM3Mol: text(version.henryPaM3Mol),
    waterSolubilityMgL: text(version.waterSolubilityMgL),
    note: text(version.note),
    ...Object.fromEntries(sources)
  };
}
