import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** The measured final extract of a preparation and fraction, as one import reported it. Never changed. */
export class Extract extends Model<InferAttributes<Extract>, InferCreationAttributes<Extract>> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare studyId: string;
  declare importId: string;
  declare experimentId: string;
  declare replicateId: string;
  declare fractionId: string | null;
  declare finalVolumeMl: number | null;
  declare aliquotShare: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
}

Extract.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    importId: { type: DataTypes.UUID, allowNull: false },
    experimentId: { type: DataTypes.UUID, allowNull: false },
    replicateId: { type: DataTypes.UUID, allowNull: false },
    fractionId: DataTypes.UUID,
    finalVolumeMl: DataTypes.DOUBLE,
    aliquotShare: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 1 },
    createdAt: DataTypes.DATE
  },
  { sequelize, modelName: 'Extract', tableName: 'extracts', updatedAt: false }
);
