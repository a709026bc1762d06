import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import type { ReplicateKind } from '../../../domain/vocabulary';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** One portion carried through. */
export class Replicate extends Model<InferAttributes<Replicate>, InferCreationAttributes<Replicate>> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare studyId: string;
  declare experimentId: string;
  declare number: number;
  declare label: string;
  declare kind: ReplicateKind;
  declare batch: string | null;
  declare sampleVolumeMl: number | null;
  declare sampleMassG: number | null;
  declare collectedAt: Date | null;
  declare extractedAt: Date | null;
  declare analysedAt: Date | null;
  declare observations: CreationOptional<string>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

Replicate.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    experimentId: { type: DataTypes.UUID, allowNull: false },
    number: { type: DataTypes.INTEGER, allowNull: false },
    label: { type: DataTypes.TEXT, allowNull: false },
    kind: { type: DataTypes.TEXT, allowNull: false },
    batch: DataTypes.TEXT,
    sampleVolumeMl: DataTypes.DOUBLE,
    sampleMassG: DataTypes.DOUBLE,
    collectedAt: DataTypes.DATE,
    extractedAt: DataTypes.DATE,
    analysedAt: DataTypes.DATE,
    observations: { type: DataTypes.TEXT, allowNull: false, defaultValue: '' },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'Replicate', tableName: 'replicates' }
);
