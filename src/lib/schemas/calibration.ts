import { z } from 'zod';
import { calibrationModels, calibrationWeightings } from '../domain/vocabulary';
import {
  listOf,
  optionalNumber,
  optionalQuantity,
  reason,
  requiredQuantity,
  requiredText,
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
        /** Concentration of an analyte whose factor is 1. */
        concentrationNgPerMl: requiredQuantity('ng/mL', 'Give the concentration of this level, in ng/mL.')
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
