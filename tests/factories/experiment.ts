import type { Medium } from '../../src/lib/domain/stages';
import type { CountsAs, FractionKind, ReplicateKind, Subtraction } from '../../src/lib/domain/vocabulary';
import { Experiment } from '../../src/lib/server/db/models/experiment';
import { Fraction } from '../../src/lib/server/db/models/fraction';
import { Replicate } from '../../src/lib/server/db/models/replicate';
import { ExperimentSpike } from '../../src/lib/server/db/models/experiment-spike';
import type { MadeStudy } from './study';

export interface ExperimentShape {
  readonly stage: string;
  readonly title: string;
  readonly medium: Medium;
  readonly matrix: string;
  readonly subtract: Subtraction;
  readonly calibrationSetId: string | null;
  readonly fractions: readonly {
    readonly name: string;
    readonly kind?: FractionKind;
    readonly countsAs?: CountsAs;
  }[];
  /** How many preparations of each kind. */
  readonly replicates: Readonly<Partial<Record<ReplicateKind, number>>>;
  /** ng of each panel entry that a spiked preparation receives. */
  readonly spikes: Readonly<Record<string, number>>;
}

export interface MadeExperiment {
  readonly experiment: Experiment;
  readonly fractions: readonly Fraction[];
  readonly replicates: readonly Replicate[];
}

const letters: Readonly<Record<ReplicateKind, string>> = {
  spiked: 'S',
  unspiked: 'U',
  'method blank': 'B',
  'post-extraction spike': 'P',
  'solvent standard': 'N'
};

/** An extraction experiment: one fraction that counts for the method, three spiked preparations. */
export async function makeExperiment(
  { study, stages }: MadeStudy,
  overrides: Readonly<Partial<ExperimentShape>> = {}
): Promise<MadeExperiment> {
  const ids = { labId: study.labId, studyId: study.id };
  const count = await Experiment.count({ where: { studyId: study.id } });
  const experiment = await Experiment.create({
    ...ids,
    number: count + 1,
    stageId: stages[overrides.stage ?? 'extraction'] ?? '',
    title: overrides.title ?? 'Spiked river water',
    medium: overrides.medium ?? 'sample matrix',
    matrix: overrides.matrix ?? study.matrix,
    levelLabel: '1',
    subtract: overrides.subtract ?? 'none',
    calibrationSetId: overrides.calibrationSetId ?? null
  });
  const within = { ...ids, experimentId: experiment.id };
  const fractions: Fraction[] = [];
  for (const [index, shape] of (overrides.fractions ?? [{ name: 'Elution' }]).entries()) {
    const { name, kind = 'elution', countsAs = 'method' } = shape;
    fractions.push(await Fraction.create({ ...within, position: index + 1, name, kind, countsAs }));
  }
  const replicates: Replicate[] = [];
  for (const [kind, number] of Object.entries(overrides.replicates ?? { spiked: 3 })) {
    for (let index = 1; index <= number; index += 1) {
      const label = `${letters[kind as ReplicateKind]}${index}`;
      replicates.push(
        await Replicate.create({ ...within, number: index, label, kind: kind as ReplicateKind })
      );
    }
  }
  for (const [panelEntryId, amountNg] of Object.entries(overrides.spikes ?? {})) {
    await ExperimentSpike.create({ ...within, replicateKind: 'spiked', panelEntryId, amountNg });
  }
  return { experiment, fractions, replicates };
}
