import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import type { CheckStandardKind } from '../../../domain/vocabulary';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** A solution that is run to tell whether a calibration still holds, or the blank of the instrument. */
export class CheckStandard extends Model<
  InferAttributes<CheckStandard>,
  InferCreationAttributes<CheckStandard>
> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare studyId: string;
  declare calibrationSetId: string;
  declare kind: CheckStandardKind;
  declare label: string;
  declare source: CreationOptional<string>;
  declare note: CreationOptional<string>;
  declare version: CreationOptional<number>;
  /** The kind of its injections; the database forms it. */
  declare readonly injectedAs: CreationOptional<'check' | 'blank'>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

CheckStandard.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    calibrationSetId: { type: DataTypes.UUID, allowNull: false },
    kind: { type: DataTypes.TEXT, allowNull: false },
    label: { type: DataTypes.TEXT, allowNull: false },
    source: { type: DataTypes.TEXT, allowNull: false, defaultValue: '' },
    note: { type: DataTypes.TEXT, allowNull: false, defaultValue: '' },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 1 },
    injectedAs: DataTypes.TEXT,
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'CheckStandard', tableName: 'check_standards' }
);
