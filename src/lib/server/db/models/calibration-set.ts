import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import type { CalibrationModelName, CalibrationWeighting } from '../../../domain/vocabulary';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** The levels of one calibration of one instrument. */
export class CalibrationSet extends Model<
  InferAttributes<CalibrationSet>,
  InferCreationAttributes<CalibrationSet>
> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare studyId: string;
  declare name: string;
  declare instrument: string;
  declare calibratedOn: string;
  declare defaultModel: CalibrationModelName;
  declare defaultWeighting: CalibrationWeighting;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

CalibrationSet.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    name: { type: DataTypes.TEXT, allowNull: false },
    instrument: { type: DataTypes.TEXT, allowNull: false },
    calibratedOn: { type: DataTypes.DATEONLY, allowNull: false },
    defaultModel: { type: DataTypes.TEXT, allowNull: false },
    defaultWeighting: { type: DataTypes.TEXT, allowNull: false },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 1 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'CalibrationSet', tableName: 'calibration_sets' }
);
