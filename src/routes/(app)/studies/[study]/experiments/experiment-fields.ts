import { replicateKinds, type ReplicateKind } from '$lib/domain/vocabulary';
import type { ExperimentView } from '$lib/views/experiments';

/** Fields of the form by the names under which they are sent. */
export type Fields = Readonly<Record<string, string>>;

/** What the form's choices are made of. */
export interface ExperimentChoices {
  readonly panel: readonly { readonly id: string; readonly name: string; readonly role: string }[];
  readonly stages: readonly { readonly key: string; readonly name: string }[];
  readonly analysts: readonly { readonly id: string; readonly name: string }[];
  readonly calibrationSets: readonly { readonly id: string; readonly name: string }[];
  readonly variants: readonly { readonly code: string; readonly name: string }[];
}

/** Kinds of preparation as the form lists them, with what each is for. */
export const kindPurposes: Readonly<Record<ReplicateKind, string>> = {
  spiked: 'carried through with the spike: their recoveries are judged',
  unspiked: 'the same sample without spike: the native amount',
  'method blank': 'everything but the sample: contamination',
  'post-extraction spike': 'extract spiked at the end: the matrix effect',
  'solvent standard': 'the same amount in solvent: the reference'
};

const text = (value: string | number | null | undefined): string => String(value ?? '');

/** The role's own amount in an experiment: the one that most of its entries share. */
function shared(spikes: ExperimentView['spikes'], kind: ReplicateKind, role: string): number | null {
  const counts = new Map<number, number>();
  for (const spike of spikes) {
    if (spike.kind === kind && spike.role === role)
      counts.set(spike.amountNg, (counts.get(spike.amountNg) ?? 0) + 1);
  }
  return [...counts].sort(([, a], [, b]) => b - a)[0]?.[0] ?? null;
}

function spikeFields(view: ExperimentView, panel: ExperimentChoices['panel']): Record<string, string> {
  const fields: Record<string, string> = {};
  const roles = {
    targetsNg: 'target',
    surrogatesNg: 'surrogate',
    extractionStandardsNg: 'extraction internal standard'
  };
  for (const [index, kind] of replicateKinds.entries()) {
    for (const [name, role] of Object.entries(roles)) {
      const common = shared(view.spikes, kind, role);
      fields[`spikes.${index}.${name}`] = text(common);
      for (const entry of panel.filter((candidate) => candidate.role === role)) {
        const own =
          view.spikes.find((spike) => spike.kind === kind && spike.panelEntryId === entry.id)?.amountNg ??
          null;
        // 0 says that an entry stays without the amount that the others of its role get.
        if (own !== common) fields[`spikes.${index}.entries.${entry.id}`] = own === null ? '0' : text(own);
      }
    }
  }
  return fields;
}

/** An experiment as its form's fields. */
export function fieldsOf(view: ExperimentView, panel: ExperimentChoices['panel']): Fields {
  const fields: Record<string, string> = {
    title: view.title,
    medium: view.medium,
    matrix: text(view.matrix),
    levelLabel: view.levelLabel,
    subtract: view.subtract,
    performedOn: text(view.performedOn),
    analystId: text(view.analyst?.id),
    calibrationSetId: text(view.calibrationSet?.id),
    sampleVolumeMl: text(view.sampleVolumeMl),
    finalVolumeMl: text(view.finalVolumeMl),
    ...spikeFields(view, panel)
  };
  for (const [index, fraction] of view.fractions.entries()) {
    fields[`fractions.${index}.id`] = fraction.id;
    fields[`fractions.${index}.name`] = fraction.name;
    fields[`fractions.${index}.kind`] = fraction.kind;
    fields[`fractions.${index}.countsAs`] = fraction.countsAs;
    for (const key of fraction.passedStages) fields[`fractions.${index}.passed.${key}`] = 'on';
  }
  const standards = panel.filter(({ role }) => role.endsWith('internal standard'));
  for (const [index, { id }] of standards.entries()) {
    const addition = view.additions.find(({ panelEntryId }) => panelEntryId === id);
    fields[`additions.${index}.point`] = text(addition?.point);
    fields[`additions.${index}.amountNg`] = text(addition?.amountNg);
    fields[`additions.${index}.concentrationNgPerMl`] = text(addition?.concentrationNgPerMl);
  }
  return fields;
}
