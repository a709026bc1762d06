import { z } from 'zod';
import type { AccessScope } from '../../domain/access-scopes';
import { experimentParameters, figureParameters, subjectParameters } from '../findings';
import { chemistryParameters } from '../panel-chemistry';
import { validationParameters } from '../validation';
import { chemistry } from './chemistry';
import { balance, compare, portions, results, stages, walkBack } from './figures';
import { importParameters } from './import-parameters';
import { resultsParameters, templateParameters } from './parameters';
import { provenance } from './provenance';
import { broughtFile, experiments, importDetail, imports, studies, study } from './records';
import { validation } from './validation';

/** What an answer holds: a schema for JSON, otherwise a file of that type. */
export type AnswerContent = Readonly<Record<string, z.ZodType | 'file'>>;

/** One thing that programs can ask for: what the published description says of a route and a method. */
export interface Operation {
  /** Route id as the framework names it. */
  readonly routeId: string;
  readonly method: 'get' | 'post';
  readonly operationId: string;
  readonly summary: string;
  readonly description?: string;
  /** null: open to everybody. */
  readonly scope: AccessScope | null;
  readonly query?: z.ZodObject;
  /** The request carries a data file. */
  readonly takesFile?: true;
  /** By status; failures are answered as problems and listed in `failures`. */
  readonly answers: Readonly<Record<number, Readonly<{ description: string; content: AnswerContent }>>>;
  /** What can fail beside what every operation has in common. */
  readonly failures?: Readonly<Record<number, string>>;
}

const json = (description: string, schema: z.ZodType): Operation['answers'] => ({
  200: { description, content: { 'application/json': schema } }
});

const ofStudy = '/api/v1/studies/[study]';
const noStudy = { 404: 'There is no such thing in this lab.' } as const;
const badQuery = { 400: 'A parameter cannot be taken; problems names it.', ...noStudy } as const;

const finding = (
  path: string,
  operationId: string,
  summary: string,
  schema: z.ZodType,
  query?: z.ZodObject
): Operation => ({
  routeId: `${ofStudy}/${path}`,
  method: 'get',
  operationId,
  summary,
  scope: 'read',
  ...(query ? { query } : {}),
  answers: json('The figures as the pages show them, unrounded.', schema),
  failures: query ? badQuery : noStudy
});

/** Every operation of the API. A test holds the list against the routes, both ways. */
export const operations: readonly Operation[] = [
  {
    routeId: '/api/v1/openapi.json',
    method: 'get',
    operationId: 'describe',
    summary: 'This description',
    scope: null,
    answers: json('OpenAPI 3.1.', z.record(z.string(), z.unknown()))
  },
  {
    routeId: '/api/v1/studies',
    method: 'get',
    operationId: 'listStudies',
    summary: 'The studies of the lab',
    scope: 'read',
    answers: json('Those at work first.', studies)
  },
  {
    routeId: ofStudy,
    method: 'get',
    operationId: 'getStudy',
    summary: 'One study: aim, criteria, stages',
    scope: 'read',
    answers: json('The study.', study),
    failures: noStudy
  },
  {
    routeId: `${ofStudy}/experiments`,
    method: 'get',
    operationId: 'listExperiments',
    summary: 'The experiments of a study',
    scope: 'read',
    answers: json('By their numbers.', experiments),
    failures: noStudy
  },
  {
    routeId: `${ofStudy}/experiments/[experiment]/template.xlsx`,
    method: 'get',
    operationId: 'downloadTemplate',
    summary: 'The data template of an experiment, filled in but for the measured values',
    scope: 'read',
    query: templateParameters,
    answers: {
      200: {
        description: 'A workbook.',
        content: { 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet': 'file' }
      }
    },
    failures: badQuery
  },
  {
    routeId: `${ofStudy}/imports`,
    method: 'get',
    operationId: 'listImports',
    summary: 'Every file that the study ever received',
    scope: 'read',
    answers: json('The newest first.', imports),
    failures: noStudy
  },
  {
    routeId: `${ofStudy}/imports`,
    method: 'post',
    operationId: 'bringFile',
    summary: 'Bring a data file in',
    description:
      'The file is kept as it came, read, checked, and stored whole or not at all. Send it as the body with its name in the parameter "file", or as the field "file" of a form. The same bytes again change nothing and answer 200 with the earlier import, so that a request whose answer was lost can be repeated.',
    scope: 'import',
    query: importParameters,
    takesFile: true,
    answers: {
      200: {
        description: 'The very same bytes are stored already; nothing changed.',
        content: { 'application/json': broughtFile }
      },
      201: { description: 'Stored.', content: { 'application/json': broughtFile } },
      202: {
        description:
          'Received and not stored: questions want an answer (each names the parameter that gives it), or no storing was asked for.',
        content: { 'application/json': broughtFile }
      }
    },
    failures: {
      ...badQuery,
      409: 'The study is in review or signed, or changed while the file was read.',
      413: 'The file is larger than this lab takes.',
      415: 'What was sent is no workbook and no table as text.',
      422: 'Received and not stored: problems names sheet, cell, what was found, what is expected and how to mend it.'
    }
  },
  {
    routeId: `${ofStudy}/imports/[import]`,
    method: 'get',
    operationId: 'getImport',
    summary: 'One import, and what stands between a waiting one and its being stored',
    scope: 'read',
    answers: json('The import.', importDetail),
    failures: noStudy
  },
  {
    routeId: `${ofStudy}/imports/[import]/file`,
    method: 'get',
    operationId: 'downloadFile',
    summary: 'The file of an import, byte for byte',
    scope: 'read',
    answers: { 200: { description: 'The file.', content: { 'application/octet-stream': 'file' } } },
    failures: noStudy
  },
  {
    ...finding('results', 'getResults', 'Method recoveries with their verdicts', results, resultsParameters),
    answers: {
      200: {
        description: 'The figures as the pages show them, unrounded.',
        content: { 'application/json': results, 'text/csv': 'file' }
      }
    }
  },
  finding('balance', 'getBalance', 'The mass balance', balance, subjectParameters),
  finding('stages', 'getStages', 'The stage ladder and its findings', stages, subjectParameters),
  finding(
    'walk-back',
    'getWalkBack',
    'What each stage takes of 100 in the sample',
    walkBack,
    subjectParameters
  ),
  finding('compare', 'compareVariants', 'Every variant beside the others', compare),
  finding(
    'portions',
    'getPortions',
    'Surrogates, blanks and matrix effects of one experiment',
    portions,
    experimentParameters
  ),
  finding(
    'validation',
    'getValidation',
    'The validation of a variant, part by part',
    validation,
    validationParameters
  ),
  finding(
    'chemistry',
    'getChemistry',
    'Charge over pH, log D and groups of the panel',
    chemistry,
    chemistryParameters.extend({
      ph: chemistryParameters.shape.ph.meta({ description: 'The pH at which shares and log D are formed.' }),
      solids: chemistryParameters.shape.solids.meta({ description: 'Suspended solids of the sample, mg/L.' }),
      phase: chemistryParameters.shape.phase.meta({
        description: 'What the bed is made of, which says what pH it stands.'
      })
    })
  ),
  finding(
    'provenance',
    'openFigure',
    'Where a figure comes from, down to file, sheet and cell',
    provenance,
    figureParameters
  )
];
