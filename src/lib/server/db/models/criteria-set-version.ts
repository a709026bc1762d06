import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import type { CriterionRule } from '../../../domain/criteria';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** The rules of a set at one time, each with its citation. Never changed. */
export class CriteriaSetVersion extends Model<
  InferAttributes<CriteriaSetVersion>,
  InferCreationAttributes<CriteriaSetVersion>
> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare criteriaSetId: string;
  declare version: number;
  declare name: string;
  declare rules: readonly CriterionRule[];
  declare createdBy: string | null;
  declare createdAt: CreationOptional<Date>;
}

CriteriaSetVersion.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    criteriaSetId: { type: DataTypes.UUID, allowNull: false },
    version: { type: DataTypes.INTEGER, allowNull: false },
    name: { type: DataTypes.TEXT, allowNull: false },
    rules: { type: DataTypes.JSONB, allowNull: false },
    createdBy: DataTypes.UUID,
    createdAt: DataTypes.DATE
  },
  { sequelize, modelName: 'CriteriaSetVersion', tableName: 'criteria_set_versions', updatedAt: false }
);
