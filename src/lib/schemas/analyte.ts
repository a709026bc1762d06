import { z } from 'zod';
import { casProblem, parseCas } from '../domain/name-key';
import { readNumber } from '../domain/numbers';
import { optionalNumber, optionalText, requiredText, wholeNumber } from './fields';

/** Values parted by semicolons, or spaces where none of them is a decimal comma. */
const numbers = optionalText(200).transform((text, context): number[] => {
  const parts = text.split(/[;\s]+/).filter((part) => part !== '');
  return parts.map((part) => {
    const reading = readNumber(part);
    if (reading.ok) return reading.value;
    context.addIssue({ code: 'custom', message: `${reading.message} Part several values by semicolons.` });
    return 0;
  });
});

const lines = optionalText(4000).transform((text) => [
  ...new Set(
    text
      .split(/\r?\n/)
      .map((line) => line.trim())
      .filter((line) => line !== '')
  )
]);

/** Properties with values whose source can be named. */
export const sourcedProperties = [
  'smiles',
  'formula',
  'molarMass',
  'logKow',
  'pkaAcid',
  'pkaBase',
  'boilingPointC',
  'vapourPressurePa',
  'henryPaM3Mol',
  'waterSolubilityMgL'
] as const;
export type SourcedProperty = (typeof sourcedProperties)[number];

export const analyteForm = z.object({
  name: requiredText('Give the name.', 200),
  synonyms: lines,
  cas: optionalText(40).transform((text, context) => {
    if (text === '') return null;
    const cas = parseCas(text);
    if (cas === null) context.addIssue({ code: 'custom', message: casProblem(text) });
    return cas;
  }),
  class: optionalText(80),
  smiles: optionalText(2000),
  formula: optionalText(120),
  molarMass: optionalNumber({ above: 0 }),
  logKow: optionalNumber({ least: -20, most: 30 }),
  pkaAcid: numbers,
  pkaBase: numbers,
  boilingPointC: optionalNumber({ least: -273.15 }),
  vapourPressurePa: optionalNumber({ least: 0 }),
  henryPaM3Mol: optionalNumber({ least: 0 }),
  waterSolubilityMgL: optionalNumber({ least: 0 }),
  sources: z.partialRecord(z.enum(sourcedProperties), optionalText(500)).default({}),
  note: optionalText(4000),
  /** Said that another analyte of the same structure is meant. */
  sameStructure: optionalText(3).transform((text) => text === 'yes')
});
export type AnalyteForm = z.output<typeof analyteForm>;

/** As much of a form as says what an analyte is; a name may still be missing. */
export const analytePreviewForm = analyteForm
  .pick({ cas: true, smiles: true, formula: true, molarMass: true, logKow: true })
  .extend({ name: optionalText(200) });
export type AnalytePreviewForm = z.output<typeof analytePreviewForm>;

export const analyteVersionForm = analyteForm.extend({
  /** The version that was opened. */
  seenVersion: wholeNumber('The version that was opened is missing. Reload the page.', { least: 1 })
});
export type AnalyteVersionForm = z.output<typeof analyteVersionForm>;
