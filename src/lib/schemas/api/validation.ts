import { z } from 'zod';
import { validationParts } from '../../domain/validation-parts';
import type {
  ControlChartView,
  PartEvidence,
  ValidationPart,
  ValidationTable,
  ValidationView
} from '../../views/validation';
import { verdicts } from '../../views/verdict';
import { describes, list, moment, number, object, text, whole } from './describe';
import { rule, verdict } from './figures';

const table = describes<ValidationTable>()(
  'ValidationTable',
  object({
    key: text,
    caption: text,
    columns: list(object({ key: text, label: text, unit: text.nullable(), numeric: z.boolean() })),
    judged: z.boolean(),
    rows: list(
      object({
        key: text,
        panelEntryId: text,
        name: text,
        href: text.nullable(),
        cells: list(object({ value: z.union([number, text, z.null()]), text: text.nullable() })),
        verdict: verdict.nullable(),
        why: text
      })
    )
  }).meta({ description: 'Rows worst first; value is unrounded, text as the page writes it.' })
);

const evidence = describes<PartEvidence>()(
  'PartEvidence',
  object({
    state: z.enum(['chosen', 'suggested', 'none']),
    sentence: text,
    experiments: list(object({ number: whole, title: text, href: text, facts: text })),
    candidates: list(object({ number: whole, title: text, facts: text, taken: z.boolean() })),
    seen: text
  }).meta({ description: 'Which experiments a part rests on, and whether a person chose them.' })
);

const pairOf = <Item extends z.ZodType>(item: Item) => z.tuple([item, item]).readonly();

const controlChart = describes<ControlChartView>()(
  'ControlChart',
  object({
    key: text,
    panelEntryId: text,
    name: text,
    unit: text,
    points: list(
      object({
        key: text,
        label: text,
        place: text,
        day: text.nullable(),
        value: number,
        counted: z.boolean(),
        says: text,
        outside: z.enum(['rule', 'action', 'warning']).nullable(),
        href: text.nullable()
      })
    ),
    limits: object({ centre: number, warning: pairOf(number), action: pairOf(number) }).nullable(),
    rule: object({ low: number.nullable(), high: number.nullable() }),
    n: whole,
    sentences: list(text),
    missing: list(text)
  }).meta({ description: 'A surrogate or internal standard over time, percent.' })
);

const part = describes<ValidationPart>()(
  'ValidationPart',
  object({
    key: z.enum([...validationParts, 'horwitz']),
    title: text,
    meaning: list(text),
    evidence: evidence.nullable(),
    rests: list(text),
    rules: list(rule),
    beside: list(rule),
    missing: list(text),
    notes: list(text),
    tables: list(table),
    charts: list(controlChart),
    pairs: list(
      object({ id: text, experiment: whole, labels: pairOf(text), reason: text, by: text, at: moment })
    ),
    pairChoices: list(
      object({
        experiment: whole,
        title: text,
        preparations: list(object({ id: text, label: text, kind: text }))
      })
    ),
    counts: z.record(z.enum(verdicts), whole).readonly()
  }).meta({ description: 'One part of a validation: what it means, rests on, is held against and lacks.' })
);

export const validation = describes<ValidationView>()(
  'Validation',
  object({
    study: text,
    variant: object({ code: text, name: text }).nullable(),
    variants: list(object({ code: text, name: text })),
    criteria: text,
    parts: list(part)
  })
);
