import { z } from 'zod';
import { panelRoles } from '../../domain/vocabulary';
import type { ChemistryFindingView, ChemistryGroupView, StandingView } from '../../views/chemistry';
import type {
  BedKindView,
  ChargeGroupView,
  PanelChemistryRow,
  PanelChemistryView,
  PhRangeView
} from '../../views/panel-chemistry';
import type { LogKowView } from '../../views/structure';
import { describes, list, number, object, text } from './describe';

const standing = describes<StandingView>()(
  'Standing',
  z.enum(['seen', 'memory', 'practice']).meta({
    description:
      'How far a statement can be relied on: seen in the document named, from memory, or a rule of the trade.'
  })
);

const finding = describes<ChemistryFindingView>()(
  'ChemistryFinding',
  object({ text, evidence: text, source: text, standing })
);

const phRange = describes<PhRangeView>()('PhRange', object({ low: number, high: number }));

const bed = describes<BedKindView>()(
  'BedKind',
  object({ key: text, label: text, range: phRange, source: text })
);

const row = describes<PanelChemistryRow>()(
  'AnalyteChemistry',
  object({
    panelEntryId: text,
    analyteId: text,
    name: text,
    role: z.enum(panelRoles),
    class: text.nullable(),
    also: list(text),
    evidence: text,
    pkaAcid: list(number),
    pkaBase: list(number),
    logKow: describes<LogKowView>()(
      'LogKow',
      object({ value: number, basis: z.enum(['library', 'predicted']), source: text })
    ).nullable(),
    neutral: number.nullable(),
    charge: z.enum(['none', 'positive', 'negative', 'both']).nullable(),
    logD: number.nullable(),
    href: text,
    curve: object({ from: number, step: number, values: list(number) }).nullable(),
    neutralRanges: list(phRange),
    chargedRanges: list(phRange),
    unknown: text.nullable()
  }).meta({ description: 'Neutral shares run from 0 to 1; curves over pH.' })
);

const facts = { key: text, title: text, question: text, findings: list(finding), source: text, standing };

const group = describes<ChemistryGroupView>()(
  'ChemistryGroup',
  object({ ...facts, names: list(text), members: list(object({ id: text, name: text, evidence: text })) })
);

const chargeGroup = describes<ChargeGroupView>()(
  'ChargeGroup',
  object({ ...facts, atPh: text, rows: list(row) })
);

export const chemistry = describes<PanelChemistryView>()(
  'PanelChemistry',
  object({
    study: object({ code: text, matrix: text, sampleVolumeMl: number.nullable() }),
    ph: number,
    phReason: text,
    planned: list(object({ ph: number, variants: list(object({ code: text, name: text })) })),
    bed,
    beds: list(bed),
    lead: text,
    passes: list(text),
    groups: list(chargeGroup),
    further: list(group),
    notes: list(text),
    sampleFormat: object({
      volumeMl: number,
      suspendedSolidsMgL: number.nullable(),
      sentence: text,
      findings: list(finding)
    }).nullable()
  }).meta({
    description:
      'What the chemistry of a panel asks of the procedure: a starting point for a qualified chemist.'
  })
);
