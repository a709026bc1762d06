import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import type { ReportedBasis } from '../../../domain/vocabulary';
import { sequelize } from '../sequelize';

/** What one person typed into the grid of an experiment and has not stored yet. */
export class Draft extends Model<InferAttributes<Draft>, InferCreationAttributes<Draft>> {
  declare labId: string;
  declare studyId: string;
  declare experimentId: string;
  declare userId: string;
  declare basis: CreationOptional<ReportedBasis>;
  declare injections: CreationOptional<number>;
  /** Text as typed, by row key and column key. */
  declare cells: CreationOptional<Readonly<Record<string, Readonly<Record<string, string>>>>>;
  declare importId: CreationOptional<string | null>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

Draft.init(
  {
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    experimentId: { type: DataTypes.UUID, allowNull: false, primaryKey: true },
    userId: { type: DataTypes.UUID, allowNull: false, primaryKey: true },
    basis: { type: DataTypes.TEXT, allowNull: false, defaultValue: 'area' },
    injections: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 1 },
    cells: { type: DataTypes.JSONB, allowNull: false, defaultValue: {} },
    importId: DataTypes.UUID,
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'Draft', tableName: 'drafts' }
);
