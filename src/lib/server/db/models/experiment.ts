import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import type { Medium } from '../../../domain/stages';
import type { Subtraction } from '../../../domain/vocabulary';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** Preparations at one stage, in one medium and matrix, at one spike level. */
export class Experiment extends Model<InferAttributes<Experiment>, InferCreationAttributes<Experiment>> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare studyId: string;
  declare number: number;
  declare stageId: string;
  declare title: string;
  declare medium: Medium;
  declare matrix: string | null;
  declare levelLabel: string;
  declare subtract: Subtraction;
  declare performedOn: string | null;
  declare analystId: string | null;
  declare calibrationSetId: string | null;
  declare sampleVolumeMl: number | null;
  declare finalVolumeMl: number | null;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

Experiment.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    number: { type: DataTypes.INTEGER, allowNull: false },
    stageId: { type: DataTypes.UUID, allowNull: false },
    title: { type: DataTypes.TEXT, allowNull: false },
    medium: { type: DataTypes.TEXT, allowNull: false },
    matrix: DataTypes.TEXT,
    levelLabel: { type: DataTypes.TEXT, allowNull: false },
    subtract: { type: DataTypes.TEXT, allowNull: false },
    performedOn: DataTypes.DATEONLY,
    analystId: DataTypes.UUID,
    calibrationSetId: DataTypes.UUID,
    sampleVolumeMl: DataTypes.DOUBLE,
    finalVolumeMl: DataTypes.DOUBLE,
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 1 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'Experiment', tableName: 'experiments' }
);
