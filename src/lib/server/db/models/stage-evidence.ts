import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** The experiment that stands for a stage of a variant. */
export class StageEvidence extends Model<
  InferAttributes<StageEvidence>,
  InferCreationAttributes<StageEvidence>
> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare studyId: string;
  declare variantId: string;
  declare stageId: string;
  declare matrix: string | null;
  declare levelLabel: string | null;
  declare experimentId: string;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

StageEvidence.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    variantId: { type: DataTypes.UUID, allowNull: false },
    stageId: { type: DataTypes.UUID, allowNull: false },
    matrix: DataTypes.TEXT,
    levelLabel: DataTypes.TEXT,
    experimentId: { type: DataTypes.UUID, allowNull: false },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'StageEvidence', tableName: 'stage_evidence' }
);
