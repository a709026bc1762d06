import { z } from 'zod';
import { media } from '../domain/stages';
import { additionPoints, countsAs, fractionKinds, replicateKinds, subtractions } from '../domain/vocabulary';
import {
  listOf,
  optionalDay,
  optionalId,
  optionalMoment,
  optionalQuantity,
  optionalText,
  requiredText,
  seenVersion,
  wholeNumber
} from './fields';

/** Amounts that one preparation of a kind receives: one for each role, others for single entries. ng. */
export const spikeForm = z.object({
  kind: z.enum(replicateKinds),
  targetsNg: optionalQuantity('ng'),
  surrogatesNg: optionalQuantity('ng'),
  extractionStandardsNg: optionalQuantity('ng'),
  /** By panel entry id, in place of the amount of its role; 0: this one is left out. */
  entries: z.record(z.uuid(), optionalQuantity('ng', { least: 0 })).default({})
});
export type SpikeForm = z.output<typeof spikeForm>;

export const additionForm = z
  .object({
    panelEntryId: z.uuid(),
    /** Empty: not used in this experiment. */
    point: z.union([z.literal(''), z.enum(additionPoints)]),
    amountNg: optionalQuantity('ng'),
    concentrationNgPerMl: optionalQuantity('ng/mL')
  })
  .superRefine((form, context) => {
    const add = (path: string, message: string) =>
      context.addIssue({ code: 'custom', path: [path], message });
    if (form.point === 'vial' && form.concentrationNgPerMl === null) {
      add('concentrationNgPerMl', 'Give the concentration in the vial, in ng/mL.');
    }
    if ((form.point === 'extract' || form.point === 'sample') && form.amountNg === null) {
      add('amountNg', `Give the amount added to the ${form.point}, in ng.`);
    }
  });
export type AdditionForm = z.output<typeof additionForm>;

export const fractionForm = z.object({
  /** Empty for a new one. */
  id: optionalId,
  name: requiredText('Name the fraction as it is called at the bench.', 80),
  kind: z.enum(fractionKinds, 'Choose what kind of fraction this is.'),
  countsAs: z.enum(
    countsAs,
    'Say whether it ends in the final extract (method) or was only measured (balance).'
  ),
  passedStages: listOf(z.string())
});
export type FractionForm = z.output<typeof fractionForm>;

export const replicatesForm = z.object({
  kind: z.enum(replicateKinds, 'Choose the kind of preparation.'),
  count: wholeNumber('Say how many.', { least: 0, most: 200 }),
  batch: optionalText(80),
  sampleVolumeMl: optionalQuantity('mL'),
  /** Labels one a line, in place of the generated ones. */
  labels: optionalText(20_000)
});
export type ReplicatesForm = z.output<typeof replicatesForm>;

const settings = {
  title: requiredText('Say in a few words what is done.', 160),
  medium: z.enum(media, 'Choose what the spike is in.'),
  matrix: optionalText(200),
  levelLabel: requiredText('Name the spike level, such as "50 ng/L".', 80),
  subtract: z.enum(subtractions, 'Say what is subtracted: nothing, the native amount or the method blank.'),
  performedOn: optionalDay,
  analystId: optionalId,
  calibrationSetId: optionalId,
  sampleVolumeMl: optionalQuantity('mL'),
  finalVolumeMl: optionalQuantity('mL'),
  spikes: z.array(spikeForm).default([]),
  additions: z.array(additionForm).default([]),
  fractions: z.array(fractionForm).max(40).default([])
};

export const experimentForm = z.object({
  stageKey: requiredText('Choose the stage at which it is spiked.', 40),
  ...settings,
  replicates: z.array(replicatesForm).default([]),
  /** Code of the variant that this experiment is the evidence of at its stage; empty: none yet. */
  variantCode: optionalText(8)
});
export type ExperimentForm = z.output<typeof experimentForm>;

export const experimentChangeForm = z.object({
  ...settings,
  version: seenVersion,
  /** Asked for once data rest on what is changed. */
  reason: optionalText(1000)
});
export type ExperimentChangeForm = z.output<typeof experimentChangeForm>;

export const replicateChangeForm = z.object({
  replicateId: z.uuid(),
  seen: z.string(),
  label: requiredText('A preparation needs a label.', 80),
  batch: optionalText(80),
  sampleVolumeMl: optionalQuantity('mL'),
  sampleMassG: optionalQuantity('g'),
  collectedAt: optionalMoment,
  extractedAt: optionalMoment,
  analysedAt: optionalMoment
});
export type ReplicateChangeForm = z.output<typeof replicateChangeForm>;

export const observationForm = z.object({
  replicateId: z.uuid(),
  seen: z.string(),
  observations: optionalText(4000)
});
export type ObservationForm = z.output<typeof observationForm>;

export const replicateSpikeForm = z.object({
  replicateId: z.uuid(),
  panelEntryId: z.uuid(),
  /** Nothing: back to what the experiment says. */
  amountNg: optionalQuantity('ng'),
  reason: requiredText('Say why this preparation received another amount.', 1000)
});
export type ReplicateSpikeForm = z.output<typeof replicateSpikeForm>;
