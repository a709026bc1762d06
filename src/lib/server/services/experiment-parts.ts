import type { PanelRole, ReplicateKind } from '../../domain/vocabulary';
import type { AdditionForm, FractionForm, SpikeForm } from '../../schemas/experiment';
import type { PanelEntryView } from '../../views/panel';
import type { StageView } from '../../views/studies';
import { ExperimentSpike } from '../db/models/experiment-spike';
import { Fraction } from '../db/models/fraction';
import { InternalStandardAddition } from '../db/models/internal-standard-addition';
import { Conflict, type Problem } from '../errors';
import { listed } from './changes';

interface Keys {
  readonly labId: string;
  readonly studyId: string;
  readonly experimentId: string;
}

/** What one preparation of a kind receives of one panel entry. */
export interface PlannedSpike {
  readonly replicateKind: ReplicateKind;
  readonly panelEntryId: string;
  readonly amountNg: number;
}

/** Kinds that receive targets: the others show what is there without them. */
const takesTargets: readonly ReplicateKind[] = ['spiked', 'post-extraction spike', 'solvent standard'];

function amountOf(spike: SpikeForm, role: PanelRole): number | null {
  if (role === 'target') return spike.targetsNg;
  if (role === 'surrogate') return spike.surrogatesNg;
  return role === 'extraction internal standard' ? spike.extractionStandardsNg : null;
}

/**
 * Spells out the amounts of a form entry by entry: one for all of a role, others in place of it. Problems go to `problems`.
 */
export function spelledSpikes(
  spikes: readonly SpikeForm[],
  panel: readonly PanelEntryView[],
  problems: Problem[]
): readonly PlannedSpike[] {
  const planned: PlannedSpike[] = [];
  for (const [index, spike] of spikes.entries()) {
    const known = new Set(panel.map(({ id }) => id));
    for (const id of Object.keys(spike.entries)) {
      if (!known.has(id)) {
        problems.push({ path: `spikes.${index}.entries.${id}`, message: 'This entry is not on the panel.' });
      }
    }
    for (const { id, role, analyte } of panel) {
      const own = spike.entries[id] ?? null;
      const amountNg = own ?? amountOf(spike, role);
      if (amountNg === null || amountNg === 0) continue;
      const path = `spikes.${index}.entries.${id}`;
      if (role === 'target' && !takesTargets.includes(spike.kind)) {
        const message = `${spike.kind === 'unspiked' ? 'An unspiked portion' : 'A method blank'} receives no target; leave ${analyte.name} out.`;
        problems.push({ path: own === null ? `spikes.${index}.targetsNg` : path, message });
      } else if (role === 'injection internal standard') {
        problems.push({
          path,
          message: `${analyte.name} is an injection internal standard: it goes into the extract or the vial, not into the sample.`
        });
      } else {
        planned.push({ replicateKind: spike.kind, panelEntryId: id, amountNg });
      }
    }
  }
  return planned;
}

/** Internal standards that are added, checked against their roles. */
export function checkedAdditions(
  additions: readonly AdditionForm[],
  panel: readonly PanelEntryView[],
  problems: Problem[]
): readonly AdditionForm[] {
  return additions.filter((addition, index) => {
    if (addition.point === '') return false;
    const entry = panel.find(({ id }) => id === addition.panelEntryId);
    const path = `additions.${index}.point`;
    if (!entry) {
      problems.push({ path, message: 'This entry is not on the panel.' });
    } else if (entry.role === 'injection internal standard' && addition.point === 'sample') {
      problems.push({
        path,
        message: `${entry.analyte.name} goes into the extract or the vial: its role is injection internal standard.`
      });
    } else if (entry.role === 'extraction internal standard' && addition.point !== 'sample') {
      problems.push({
        path,
        message: `${entry.analyte.name} goes into the sample: its role is extraction internal standard.`
      });
    } else if (entry.role === 'target' || entry.role === 'surrogate') {
      problems.push({ path, message: `${entry.analyte.name} is no internal standard on this panel.` });
    }
    return true;
  });
}

/**
 * Extraction standards that are spiked without being listed as added: their addition follows from the spike, so that a reader of
 * data files knows where they went in.
 */
export function withSpikedStandards(
  additions: readonly AdditionForm[],
  spikes: readonly PlannedSpike[],
  panel: readonly PanelEntryView[]
): readonly AdditionForm[] {
  const listedIds = new Set(additions.map(({ panelEntryId }) => panelEntryId));
  const standards = panel.filter(
    ({ id, role }) => role === 'extraction internal standard' && !listedIds.has(id)
  );
  const implied = standards.flatMap(({ id }): AdditionForm[] => {
    const own = spikes.filter(({ panelEntryId }) => panelEntryId === id);
    const spike = own.find(({ replicateKind }) => replicateKind === 'spiked') ?? own[0];
    return spike
      ? [{ panelEntryId: id, point: 'sample', amountNg: spike.amountNg, concentrationNgPerMl: null }]
      : [];
  });
  return [...additions, ...implied];
}

/** Fractions that make sense for an experiment spiked at this stage. */
export function checkFractions(
  fractions: readonly FractionForm[],
  stage: Pick<StageView, 'kind' | 'name'>,
  stages: readonly Pick<StageView, 'key'>[],
  problems: Problem[]
): void {
  const keys = new Set(stages.map(({ key }) => key));
  const names = new Set<string>();
  for (const [index, fraction] of fractions.entries()) {
    const name = fraction.name.toLowerCase();
    if (names.has(name)) {
      problems.push({
        path: `fractions.${index}.name`,
        message: `There are two fractions called ${fraction.name}.`
      });
    }
    names.add(name);
    const unknown = fraction.passedStages.filter((key) => !keys.has(key));
    if (unknown.length > 0) {
      problems.push({
        path: `fractions.${index}.passedStages`,
        message: 'Choose stages of this study.',
        found: listed(unknown)
      });
    }
  }
  if (stage.kind === 'loss' && !fractions.some(({ countsAs }) => countsAs === 'method')) {
    problems.push({
      path: 'fractions',
      message:
        'At least one fraction has to count for the method: what ends in the final extract is the recovery that is judged.'
    });
  }
}

/** Replaces what preparations receive and which internal standards are added. */
export async function writeAmounts(
  keys: Keys,
  spikes: readonly PlannedSpike[],
  additions: readonly AdditionForm[]
): Promise<void> {
  const { experimentId } = keys;
  await ExperimentSpike.destroy({ where: { experimentId } });
  await ExperimentSpike.bulkCreate(spikes.map((spike) => ({ ...keys, ...spike })));
  await InternalStandardAddition.destroy({ where: { experimentId } });
  await InternalStandardAddition.bulkCreate(
    additions.flatMap(({ panelEntryId, point, amountNg, concentrationNgPerMl }) =>
      point === ''
        ? []
        : [
            {
              ...keys,
              panelEntryId,
              point,
              amountNg: point === 'vial' ? null : amountNg,
              concentrationNgPerMl: point === 'vial' ? concentrationNgPerMl : null
            }
          ]
    )
  );
}

/** Brings the fractions of an experiment into the form's order and content. @throws Conflict when one with data would go */
export async function writeFractions(
  keys: Keys,
  fractions: readonly FractionForm[],
  measured: ReadonlySet<string>
): Promise<void> {
  const stored = await Fraction.findAll({ where: { ...keys } });
  const kept = new Set(fractions.flatMap(({ id }) => (id ? [id] : [])));
  const gone = stored.filter(({ id }) => !kept.has(id));
  const held = gone.filter(({ id }) => measured.has(id));
  if (held.length > 0) {
    throw new Conflict(
      `Stored data speak of ${listed(held.map(({ name }) => name))}, so it stays in this experiment.`
    );
  }
  for (const fraction of gone) await fraction.destroy();
  for (const [index, { id, kind, countsAs, passedStages }] of fractions.entries()) {
    const own = stored.find((fraction) => fraction.id === id);
    // Names move between fractions: a first round under names that nobody has typed.
    await own?.update({
      position: index + 1,
      name: `${own.id} ${index}`.slice(0, 80),
      kind,
      countsAs,
      passedStages
    });
  }
  for (const [index, { id, name, kind, countsAs, passedStages }] of fractions.entries()) {
    const own = stored.find((fraction) => fraction.id === id);
    if (own) await own.update({ name });
    else await Fraction.create({ ...keys, position: index + 1, name, kind, countsAs, passedStages });
  }
}
