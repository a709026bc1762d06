import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** A replicate, a fraction or one analyte of it, set aside with a cause. */
export class Exclusion extends Model<InferAttributes<Exclusion>, InferCreationAttributes<Exclusion>> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare studyId: string;
  declare experimentId: string;
  declare replicateId: string;
  declare fractionId: string | null;
  declare analyteId: string | null;
  declare cause: string;
  declare excludedBy: string;
  declare excludedAt: CreationOptional<Date>;
  declare liftedBy: string | null;
  declare liftedAt: Date | null;
  declare liftReason: string | null;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

Exclusion.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    experimentId: { type: DataTypes.UUID, allowNull: false },
    replicateId: { type: DataTypes.UUID, allowNull: false },
    fractionId: DataTypes.UUID,
    analyteId: DataTypes.UUID,
    cause: { type: DataTypes.TEXT, allowNull: false },
    excludedBy: { type: DataTypes.UUID, allowNull: false },
    excludedAt: { type: DataTypes.DATE, allowNull: false, defaultValue: DataTypes.NOW },
    liftedBy: DataTypes.UUID,
    liftedAt: DataTypes.DATE,
    liftReason: DataTypes.TEXT,
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'Exclusion', tableName: 'exclusions' }
);
