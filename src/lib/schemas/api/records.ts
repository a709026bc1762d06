import { z } from 'zod';
import { ruleTypes, type CriterionRule } from '../../domain/criteria';
import { media, stageKinds } from '../../domain/stages';
import { importStates, studyStates } from '../../domain/vocabulary';
import {
  questionAnswers,
  type BroughtFileView,
  type FileProblemView,
  type ImportDetailView,
  type ImportFacts
} from '../../views/brought-files';
import type { ExperimentListItem } from '../../views/experiments';
import type { StudyListItem, StudyView } from '../../views/studies';
import { day, describes, list, moment, number, object, text, whole } from './describe';

const studyListItem = describes<StudyListItem>()(
  'StudyListItem',
  object({
    code: text.meta({ description: 'The {study} of every address.' }),
    title: text,
    matrix: text,
    state: z.enum(studyStates),
    revision: whole,
    owner: text,
    targets: whole,
    variants: whole,
    experiments: whole,
    stageReached: text.nullable(),
    lastEventAt: moment,
    daysWaiting: whole.nullable(),
    waitsFor: text.nullable()
  })
);

export const studies = describes<{ studies: readonly StudyListItem[] }>()(
  'Studies',
  object({ studies: list(studyListItem) })
);

const criterionRule = describes<CriterionRule>()(
  'CriterionRule',
  object({
    type: z.enum([...ruleTypes, 'monotone curve']),
    low: number.nullable(),
    high: number.nullable(),
    unit: z.enum(['%', 'count', '1', 'h']),
    citation: text,
    year: whole.nullable(),
    standing: z.enum(['seen', 'memory', 'own']),
    note: text.nullable()
  })
);

export const study = describes<{ study: StudyView }>()(
  'StudyAnswer',
  object({
    study: describes<StudyView>()(
      'Study',
      object({
        id: text,
        code: text,
        title: text,
        matrix: text,
        objective: text,
        sampleVolumeMl: number.nullable(),
        state: z.enum(studyStates),
        isOpen: z.boolean(),
        revision: whole,
        version: whole,
        owner: text,
        criteria: object({
          setId: text,
          versionId: text,
          name: text,
          version: whole,
          hasNewer: z.boolean(),
          rules: list(criterionRule)
        }),
        stages: list(object({ id: text, key: text, name: text, position: whole, kind: z.enum(stageKinds) })),
        counts: object({
          panel: whole,
          variants: whole,
          experiments: whole,
          calibrationSets: whole,
          imports: whole
        })
      })
    )
  })
);

export const experiments = describes<{ experiments: readonly ExperimentListItem[] }>()(
  'Experiments',
  object({
    experiments: list(
      describes<ExperimentListItem>()(
        'Experiment',
        object({
          number: whole.meta({
            description: 'The {experiment} of addresses, and the parameter of an import.'
          }),
          title: text,
          stageKey: text,
          stageName: text,
          medium: z.enum(media),
          matrix: text.nullable(),
          levelLabel: text,
          performedOn: day.nullable(),
          spiked: whole,
          others: whole,
          fractions: whole,
          measured: whole,
          exclusions: whole,
          variants: list(text)
        })
      )
    )
  })
);

const importFacts = describes<ImportFacts>()(
  'Import',
  object({
    id: text,
    fileName: text,
    byteSize: whole,
    sha256: text,
    state: z.enum(importStates),
    valueCount: whole.meta({ description: 'How many values it stored; 0 while it waits.' }),
    experiments: list(text),
    receivedAt: moment,
    receivedBy: text,
    storedAt: moment.nullable(),
    storedBy: text.nullable(),
    endedAt: moment.nullable(),
    endedBy: text.nullable(),
    endReason: text.nullable()
  })
);

export const imports = describes<{ imports: readonly ImportFacts[] }>()(
  'Imports',
  object({ imports: list(importFacts) })
);

export const fileProblem = describes<FileProblemView>()(
  'FileProblem',
  object({
    path: text.meta({
      description: 'Sheet and cell in one: "Carbon!F18"; "file" for what concerns all of it.'
    }),
    severity: z.enum(['error', 'question', 'note']),
    code: text.meta({ description: 'A stable word: "not-a-number".' }),
    sheet: text.nullable(),
    cell: text.nullable(),
    found: text,
    expected: text,
    message: text,
    fix: text,
    answer: z
      .enum(questionAnswers)
      .nullable()
      .meta({ description: 'The parameter that answers a question when the file is sent again.' })
  })
);

export const importDetail = describes<ImportDetailView>()(
  'ImportDetail',
  object({ import: importFacts, problems: list(fileProblem) })
);

export const broughtFile = describes<BroughtFileView>()(
  'BroughtFile',
  object({
    outcome: z.enum(['stored', 'received', 'known']).meta({
      description: 'known: the very same bytes are stored already, and nothing changed.'
    }),
    import: importFacts,
    questions: list(fileProblem),
    notes: list(fileProblem)
  })
);
