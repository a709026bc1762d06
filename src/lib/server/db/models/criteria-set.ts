import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** A lasting set of acceptance criteria; its rules stand in its versions. */
export class CriteriaSet extends Model<InferAttributes<CriteriaSet>, InferCreationAttributes<CriteriaSet>> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare currentVersionId: string | null;
  declare archivedAt: Date | null;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

CriteriaSet.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    currentVersionId: DataTypes.UUID,
    archivedAt: DataTypes.DATE,
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'CriteriaSet', tableName: 'criteria_sets' }
);
