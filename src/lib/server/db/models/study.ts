import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import type { StudyState } from '../../../domain/vocabulary';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** One method-development effort. */
export class Study extends Model<InferAttributes<Study>, InferCreationAttributes<Study>> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare code: string;
  declare title: string;
  declare matrix: string;
  declare objective: CreationOptional<string>;
  declare sampleVolumeMl: number | null;
  declare state: CreationOptional<StudyState>;
  declare revision: CreationOptional<number>;
  declare dataVersion: CreationOptional<string>;
  declare version: CreationOptional<number>;
  declare criteriaSetId: string;
  declare criteriaSetVersionId: string;
  declare ownerId: string;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

Study.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    code: { type: DataTypes.TEXT, allowNull: false },
    title: { type: DataTypes.TEXT, allowNull: false },
    matrix: { type: DataTypes.TEXT, allowNull: false },
    objective: { type: DataTypes.TEXT, allowNull: false, defaultValue: '' },
    sampleVolumeMl: DataTypes.DOUBLE,
    state: { type: DataTypes.TEXT, allowNull: false, defaultValue: 'draft' },
    revision: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 1 },
    dataVersion: { type: DataTypes.BIGINT, allowNull: false, defaultValue: 1 },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 1 },
    criteriaSetId: { type: DataTypes.UUID, allowNull: false },
    criteriaSetVersionId: { type: DataTypes.UUID, allowNull: false },
    ownerId: { type: DataTypes.UUID, allowNull: false },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'Study', tableName: 'studies' }
);
