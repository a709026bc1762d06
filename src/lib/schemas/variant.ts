import { z } from 'zod';
import { stepKinds } from '../domain/vocabulary';
import {
  optionalNumber,
  optionalQuantity,
  optionalText,
  requiredText,
  seenVersion,
  wholeNumber
} from './fields';

const named = {
  name: requiredText('Give the variant a name, such as "Mixed-mode cartridge, pH 7".', 160),
  description: optionalText(4000)
};

export const variantForm = z.object({
  code: requiredText('Give a short code, such as A.', 8).refine(
    (code) => /^[A-Za-z0-9]{1,8}$/.test(code),
    'One to eight letters or digits: the code is part of the address.'
  ),
  ...named
});
export type VariantForm = z.output<typeof variantForm>;

export const variantChangeForm = z.object({ ...named, version: seenVersion });
export type VariantChangeForm = z.output<typeof variantChangeForm>;

export const stepForm = z.object({
  stageKey: requiredText('Choose the stage that this step belongs to.', 40),
  kind: z.enum(stepKinds, 'Choose what kind of step this is.'),
  instruction: requiredText('Say what is done, with what, how much.', 2000),
  ph: optionalNumber({ least: -2, most: 16 }),
  solvent: optionalText(200),
  volumeMl: optionalQuantity('mL'),
  minutes: optionalQuantity('min', { least: 0 }),
  temperatureC: optionalNumber({ least: -273.15, most: 1000 })
});
export type StepForm = z.output<typeof stepForm>;

export const stepsForm = z.object({ version: seenVersion, steps: z.array(stepForm).max(200) });
export type StepsForm = z.output<typeof stepsForm>;

export const evidenceForm = z.object({
  stageKey: requiredText('The stage is missing.', 40),
  /** 0: no experiment stands for this stage. */
  experimentNumber: wholeNumber('Choose an experiment.', { least: 0 }),
  matrix: optionalText(200),
  levelLabel: optionalText(80)
});
export type EvidenceForm = z.output<typeof evidenceForm>;
