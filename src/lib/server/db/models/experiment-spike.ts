import { DataTypes, Model, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import type { ReplicateKind } from '../../../domain/vocabulary';
import { sequelize } from '../sequelize';

/** What one preparation of a kind receives of one panel entry, in ng. */
export class ExperimentSpike extends Model<
  InferAttributes<ExperimentSpike>,
  InferCreationAttributes<ExperimentSpike>
> {
  declare labId: string;
  declare studyId: string;
  declare experimentId: string;
  declare replicateKind: ReplicateKind;
  declare panelEntryId: string;
  declare amountNg: number;
}

ExperimentSpike.init(
  {
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    experimentId: { type: DataTypes.UUID, allowNull: false, primaryKey: true },
    replicateKind: { type: DataTypes.TEXT, allowNull: false, primaryKey: true },
    panelEntryId: { type: DataTypes.UUID, allowNull: false, primaryKey: true },
    amountNg: { type: DataTypes.DOUBLE, allowNull: false }
  },
  { sequelize, modelName: 'ExperimentSpike', tableName: 'experiment_spikes', timestamps: false }
);
