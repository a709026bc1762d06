import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** One injection of an extract, a level, a check or a blank, as one import reported it. Never changed. */
export class Injection extends Model<InferAttributes<Injection>, InferCreationAttributes<Injection>> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare studyId: string;
  declare importId: string;
  declare sequenceId: string;
  declare position: number;
  declare kind: 'level' | 'check' | 'blank' | 'extract';
  declare extractId: string | null;
  declare levelId: string | null;
  declare checkStandardId: CreationOptional<string | null>;
  declare number: CreationOptional<number>;
  declare dilution: CreationOptional<number>;
  declare runAt: Date | null;
  declare createdAt: CreationOptional<Date>;
}

Injection.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    importId: { type: DataTypes.UUID, allowNull: false },
    sequenceId: { type: DataTypes.UUID, allowNull: false },
    position: { type: DataTypes.INTEGER, allowNull: false },
    kind: { type: DataTypes.TEXT, allowNull: false },
    extractId: DataTypes.UUID,
    levelId: DataTypes.UUID,
    checkStandardId: DataTypes.UUID,
    number: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 1 },
    dilution: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 1 },
    runAt: DataTypes.DATE,
    createdAt: DataTypes.DATE
  },
  { sequelize, modelName: 'Injection', tableName: 'injections', updatedAt: false }
);
