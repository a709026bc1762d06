import type { Actor } from '../../domain/actor';
import type { BedParameters, ChemistryParameters } from '../../schemas/panel-chemistry';
import type { OpenSubstanceView, PanelChemistryView } from '../../views/panel-chemistry';
import type { VariantView } from '../../views/variants';
import { chemistryGroups, readPasses } from '../chemistry';
import type { Study } from '../db/models/study';
import { NotFound } from '../errors';
import { bedKind, bedKinds } from './chemistry/beds';
import { breakthroughView } from './chemistry/breakthrough-view';
import { panelLead } from './chemistry/panel-lead';
import { groupedRows, type RowOrder } from './chemistry/panel-rows';
import { panelSubstances, type PanelSubstance } from './chemistry/panel-substances';
import { defaultPh, plannedPhs } from './chemistry/planned-phs';
import { readSubstance } from './chemistry/read-substance';
import { sampleFormatView } from './chemistry/sample-format-view';
import { substanceView } from './chemistry/substance-view';
import { counted, listed } from './changes';
import { require } from './permissions';
import { studyOf } from './study-of';
import { listVariants } from './variants';

/** How the rows are put in order, and where each leads. */
export interface ChemistryPresentation {
  readonly order: RowOrder;
  readonly href: (entryId: string) => string;
}

/** What the procedures of a study say to its chemistry. */
async function plans(actor: Actor, study: Study, asked: number | null) {
  const variants = await listVariants(actor, study.code);
  const planned = plannedPhs(variants);
  // The variant whose extraction was measured last, as the findings have it.
  const measured = variants.findLast(({ evidence }) =>
    evidence.some(({ stageKey }) => stageKey === 'extraction')
  );
  const usual = defaultPh(
    planned,
    variants.map(({ code }) => code),
    measured?.code ?? null
  );
  const made = (measured ?? variants.at(-1))?.steps;
  return {
    planned,
    finalVolumeMl: finalVolumeOf(made ?? []),
    ph: asked ?? usual.ph,
    phReason:
      asked !== null
        ? 'chosen here'
        : usual.variant === null
          ? 'no variant says at which pH it loads'
          : `at which variant ${usual.variant} takes its analytes up`
  };
}

/** The volume that a procedure makes its extract up to. */
function finalVolumeOf(steps: VariantView['steps']): number | null {
  const made = steps.findLast(({ kind, parameters }) => kind === 'make up to volume' && parameters.volumeMl);
  return made?.parameters.volumeMl ?? null;
}

/** An injection internal standard never meets the sorbent. */
const isExtracted = ({ role }: PanelSubstance): boolean => role !== 'injection internal standard';

/**
 * What the chemistry of a panel asks of its procedure: the charge of every analyte that is extracted over pH and at the chosen
 * one, its log D, the groups and their questions, what one pass or two would have neutral, and the format of the sample.
 * @throws NotFound
 */
export async function panelChemistry(
  actor: Actor,
  code: string,
  query: ChemistryParameters,
  { order, href }: ChemistryPresentation
): Promise<PanelChemistryView> {
  require(actor, 'studies.see');
  const study = await studyOf(actor, code);
  const panel = await panelSubstances(study);
  const { planned, ph, phReason, finalVolumeMl } = await plans(actor, study, query.ph);
  const bed = bedKind(query.phase);
  const reads = await Promise.all(
    panel.filter(isExtracted).map((substance) => readSubstance(substance, substance.entryId))
  );
  const analytes = reads.map(({ analyte }) => analyte);
  const grouped = groupedRows(reads, chemistryGroups(analytes, { range: bed.range, finalVolumeMl }), {
    ph,
    order,
    href
  });
  const rows = grouped.groups.flatMap((group) => group.rows);
  return {
    study: { code: study.code, matrix: study.matrix, sampleVolumeMl: study.sampleVolumeMl },
    ph,
    phReason,
    planned,
    bed,
    beds: bedKinds,
    lead: panelLead(rows, ph),
    passes: rows.length === 0 ? [] : readPasses(analytes, bed.range).sentences,
    ...grouped,
    notes: notesOf(panel, reads),
    sampleFormat: study.sampleVolumeMl === null ? null : sampleFormatView(study.sampleVolumeMl, query.solids)
  };
}

function notesOf(
  panel: readonly PanelSubstance[],
  reads: readonly Awaited<ReturnType<typeof readSubstance>>[]
): readonly string[] {
  const leftOut = panel.filter((entry) => !isExtracted(entry)).map(({ name }) => name);
  const assumed = reads.filter(
    ({ charge }) => charge.known && !charge.hasPka && charge.groups.permanentCharge === 0
  );
  const predicted = reads.filter(({ logKow }) => logKow?.basis === 'predicted');
  return [
    ...(assumed.length > 0
      ? [
          `The library holds no pKa of ${counted(assumed.length, 'analyte')}, and they are taken to have no group that ionises: ${listed(assumed.map(({ substance }) => substance.name))}.`
        ]
      : []),
    ...(predicted.length > 0
      ? [
          `log Kow of ${listed(predicted.map(({ substance }) => substance.name))} is predicted from the structure, because the library holds none.`
        ]
      : []),
    ...(leftOut.length > 0
      ? [
          `Left out: ${listed(leftOut)}, which ${leftOut.length === 1 ? 'goes' : 'go'} in after the extraction.`
        ]
      : [])
  ];
}

/**
 * Everything the program can say of one analyte of a panel, at the chosen pH and for a bed to think about.
 * @throws NotFound when the panel does not have this entry
 */
export async function openSubstance(
  actor: Actor,
  code: string,
  entryId: string,
  query: ChemistryParameters & BedParameters
): Promise<OpenSubstanceView> {
  require(actor, 'studies.see');
  const study = await studyOf(actor, code);
  const substance = (await panelSubstances(study)).find((entry) => entry.entryId === entryId);
  if (!substance) throw new NotFound();
  const { ph, finalVolumeMl, planned } = await plans(actor, study, query.ph);
  const read = await readSubstance(substance, entryId);
  const others = planned.map((one) => one.ph).filter((one) => one !== ph);
  return {
    ...(await substanceView(substance, read, [ph, ...others], finalVolumeMl)),
    panelEntryId: entryId,
    role: substance.role,
    breakthrough: breakthroughView(read, ph, {
      ...query,
      volume: query.volume ?? study.sampleVolumeMl
    })
  };
}
