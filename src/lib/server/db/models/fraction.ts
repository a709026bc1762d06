import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import type { CountsAs, FractionKind } from '../../../domain/vocabulary';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** A part of a preparation that is collected and measured by itself. */
export class Fraction extends Model<InferAttributes<Fraction>, InferCreationAttributes<Fraction>> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare studyId: string;
  declare experimentId: string;
  declare position: number;
  declare name: string;
  declare kind: FractionKind;
  declare countsAs: CountsAs;
  declare passedStages: CreationOptional<readonly string[]>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

Fraction.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    experimentId: { type: DataTypes.UUID, allowNull: false },
    position: { type: DataTypes.INTEGER, allowNull: false },
    name: { type: DataTypes.TEXT, allowNull: false },
    kind: { type: DataTypes.TEXT, allowNull: false },
    countsAs: { type: DataTypes.TEXT, allowNull: false },
    passedStages: { type: DataTypes.ARRAY(DataTypes.TEXT), allowNull: false, defaultValue: [] },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'Fraction', tableName: 'fractions' }
);
