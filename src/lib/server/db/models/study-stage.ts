import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import type { StageKind } from '../../../domain/stages';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** A place in the procedure at which an experiment is spiked; position 1 is the detector. */
export class StudyStage extends Model<InferAttributes<StudyStage>, InferCreationAttributes<StudyStage>> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare studyId: string;
  declare key: string;
  declare name: string;
  declare position: number;
  declare kind: StageKind;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

StudyStage.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    key: { type: DataTypes.TEXT, allowNull: false },
    name: { type: DataTypes.TEXT, allowNull: false },
    position: { type: DataTypes.INTEGER, allowNull: false },
    kind: { type: DataTypes.TEXT, allowNull: false },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'StudyStage', tableName: 'study_stages' }
);
