import { z } from 'zod';
import type { FormulaNode } from '../../views/formula';
import type { ProvenanceView } from '../../views/provenance';
import { verdicts } from '../../views/verdict';
import { describes, list, object, text } from './describe';

const node: z.ZodType<FormulaNode> = z.lazy(() => formula);

const formula: z.ZodType<FormulaNode> = describes<FormulaNode>()(
  'Formula',
  z.discriminatedUnion('kind', [
    object({ kind: z.literal('name'), text, bar: z.boolean().optional() }),
    object({ kind: z.literal('number'), text }),
    object({ kind: z.literal('operator'), text }),
    object({ kind: z.literal('words'), text }),
    object({ kind: z.literal('row'), items: list(node) }),
    object({ kind: z.literal('sub'), base: node, sub: node }),
    object({ kind: z.literal('super'), base: node, super: node }),
    object({ kind: z.literal('fraction'), over: node, under: node }),
    object({ kind: z.literal('root'), of: node }),
    object({ kind: z.literal('sum'), index: node, of: node })
  ]) as z.ZodType<FormulaNode>
);

const hrefOrEnd = text.nullable().meta({ description: 'Opens the next level; null: this is where it ends.' });

export const provenance = describes<ProvenanceView>()(
  'Provenance',
  object({
    address: text,
    title: text,
    panelEntryId: text.nullable(),
    figure: object({
      value: text,
      unit: text,
      halfWidth: text.nullable(),
      level: z.number().nullable(),
      n: text.nullable()
    }).nullable(),
    missing: text.nullable(),
    verdict: object({ verdict: z.enum(verdicts).nullable(), detail: text }).nullable(),
    formula: formula.nullable(),
    reading: text,
    sentences: list(text),
    inputs: list(object({ label: text, value: text, unit: text, note: text.nullable(), href: hrefOrEnd })),
    tables: list(
      object({
        caption: text,
        columns: list(object({ key: text, label: text, unit: text.nullable() })),
        rows: list(
          object({
            key: text,
            label: text,
            cells: list(object({ text: text.nullable(), href: text.nullable(), note: text.nullable() })),
            setAside: text.nullable()
          })
        )
      })
    ),
    cells: list(object({ fileName: text, sheet: text, cell: text, rawText: text, sha256: text, href: text })),
    setAside: list(object({ text })),
    up: object({ label: text, href: text }).nullable()
  }).meta({ description: 'Where a figure comes from: one level of the way down to the cell of the file.' })
);
