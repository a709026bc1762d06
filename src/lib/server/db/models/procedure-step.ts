import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import type { StepParameters } from '../../../domain/procedure';
import type { StepKind } from '../../../domain/vocabulary';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** One step of a variant's procedure, in order. */
export class ProcedureStep extends Model<
  InferAttributes<ProcedureStep>,
  InferCreationAttributes<ProcedureStep>
> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare studyId: string;
  declare variantId: string;
  declare stageId: string;
  declare position: number;
  declare kind: StepKind;
  declare instruction: string;
  declare parameters: CreationOptional<StepParameters>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

ProcedureStep.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    variantId: { type: DataTypes.UUID, allowNull: false },
    stageId: { type: DataTypes.UUID, allowNull: false },
    position: { type: DataTypes.INTEGER, allowNull: false },
    kind: { type: DataTypes.TEXT, allowNull: false },
    instruction: { type: DataTypes.TEXT, allowNull: false },
    parameters: { type: DataTypes.JSONB, allowNull: false, defaultValue: {} },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'ProcedureStep', tableName: 'procedure_steps' }
);
