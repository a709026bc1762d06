import { z } from 'zod';
import { calibrationModels, calibrationWeightings } from '../domain/vocabulary';
import {
  listOf,
  optionalId,
  optionalNumber,
  optionalQuantity,
  optionalText,
  reason,
  requiredText,
  seenVersion,
  wholeNumber
} from './fields';

const model = z.enum(calibrationModels, 'Choose how the levels are fitted.');
const weighting = z.enum(calibrationWeightings, 'Choose the weighting.');

export const calibrationSetForm = z.object({
  name: requiredText('Name the set, such as "March standards".', 120),
  instrument: requiredText('Say on which instrument.', 120),
  calibratedOn: z.iso.date('Enter the day, as year-month-day.'),
  defaultModel: model,
  defaultWeighting: weighting,
  levels: z
    .array(
      z.object({
        label: requiredText('Name the level as the instrument does, such as L1.', 80),
        /** Concentration of an analyte whose factor is 1; null: only what is given analyte by analyte. */
        concentrationNgPerMl: optionalQuantity('ng/mL'),
        /** By panel entry: what this level holds of single analytes, in place of that. */
        cells: z.record(z.uuid(), optionalQuantity('ng/mL', { least: 0 })).optional()
      })
    )
    .min(1, 'A set needs at least one level.')
    .max(40),
  /** By panel entry: what multiplies the level's concentration; absent: 1. 0: the entry is not in the standards. */
  factors: z.record(z.uuid(), optionalNumber({ least: 0 })).default({}),
  /** By panel entry: an internal standard's concentration, the same in every level. */
  constants: z.record(z.uuid(), optionalQuantity('ng/mL', { least: 0 })).default({}),
  /** By panel entry and level label: single concentrations in place of all of these. */
  concentrations: z
    .record(z.uuid(), z.record(z.string(), optionalQuantity('ng/mL', { least: 0 })))
    .default({})
});
export type CalibrationSetForm = z.output<typeof calibrationSetForm>;

export const fitForm = z.object({
  panelEntryId: z.uuid('This analyte is not known here.'),
  /** The revision the person saw; 0: the set's default was in force. */
  seenRevision: wholeNumber('The revision that was opened is missing. Reload the page.', { least: 0 }),
  model,
  weighting,
  levelsLeftOut: listOf(z.uuid()),
  reason
});
export type FitForm = z.output<typeof fitForm>;

/** Lines that are proposed for some analytes, as they stand in the address of the page. */
export const proposalQuery = z.object({
  entries: listOf(z.uuid('This analyte is not known here.')).refine(
    (entries) => entries.length > 0,
    'Choose at least one analyte.'
  ),
  model,
  weighting: weighting.default('none'),
  /** keep: each analyte goes on without the levels it is without now. */
  levels: z.enum(['keep', 'these'], 'Choose which levels are used.').default('these'),
  levelsLeftOut: listOf(z.uuid())
});
export type ProposalQuery = z.output<typeof proposalQuery>;

export const fitsForm = proposalQuery.extend({
  /** The revision the person saw, by entry; absent or 0: the set's default was in force. */
  seen: z
    .record(z.uuid(), wholeNumber('The revision that was opened is missing. Reload the page.', { least: 0 }))
    .default({}),
  /** Token of the preview that was confirmed. */
  foretold: requiredText('Look first at what the choice moves.', 64),
  reason
});
export type FitsForm = z.output<typeof fitsForm>;

/** The levels of a set as they are to be, from a grid: what a row has no cell for stays as it is. */
export const levelsProposal = z.object({
  seenVersion,
  levels: z
    .array(
      z.object({
        /** Empty: a level more. */
        id: optionalId,
        label: optionalText(80),
        remove: z.literal('on').optional(),
        /** By panel entry, ng/mL; empty or 0: the level does not hold it. */
        cells: z.record(z.uuid(), optionalQuantity('ng/mL', { least: 0 })).default({})
      })
    )
    .max(60, 'A set has 60 levels at most.')
});
export type LevelsProposal = z.output<typeof levelsProposal>;

export const levelsForm = levelsProposal.extend({
  foretold: requiredText('Look first at what the change moves.', 64),
  reason
});
export type LevelsForm = z.output<typeof levelsForm>;
