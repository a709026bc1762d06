import { DataTypes, Model, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../sequelize';

/** Where one preparation received another amount than its experiment says, in ng. */
export class ReplicateSpike extends Model<
  InferAttributes<ReplicateSpike>,
  InferCreationAttributes<ReplicateSpike>
> {
  declare labId: string;
  declare studyId: string;
  declare replicateId: string;
  declare panelEntryId: string;
  declare amountNg: number;
}

ReplicateSpike.init(
  {
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    replicateId: { type: DataTypes.UUID, allowNull: false, primaryKey: true },
    panelEntryId: { type: DataTypes.UUID, allowNull: false, primaryKey: true },
    amountNg: { type: DataTypes.DOUBLE, allowNull: false }
  },
  { sequelize, modelName: 'ReplicateSpike', tableName: 'replicate_spikes', timestamps: false }
);
