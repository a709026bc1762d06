import { z } from 'zod';
import { panelRoles } from '../domain/vocabulary';
import { optionalQuantity, optionalText, requiredText, seenVersion } from './fields';

const studyCode = optionalText(40).refine(
  (code) => code === '' || /^[A-Za-z0-9][A-Za-z0-9-]{1,39}$/.test(code),
  "Two to forty letters, digits or hyphens, beginning with a letter or a digit: the code is part of the study's address."
);

const aim = {
  title: requiredText('Give the study a title.', 200),
  matrix: requiredText('Say what is extracted: river water, effluent, seawater …', 200),
  objective: optionalText(4000),
  sampleVolumeMl: optionalQuantity('mL'),
  criteriaSetId: z.uuid('Choose the criteria that the recoveries are held against.')
};

export const studyForm = z.object({
  ...aim,
  /** Empty: the next free one is given. */
  code: studyCode,
  /** Names or CAS numbers, one a line. */
  panelText: optionalText(100_000),
  panelRole: z.enum(panelRoles).default('target')
});
export type StudyForm = z.output<typeof studyForm>;
export type StudyFormInput = z.input<typeof studyForm>;

export const studyChangeForm = z.object({ ...aim, version: seenVersion });
export type StudyChangeForm = z.output<typeof studyChangeForm>;
