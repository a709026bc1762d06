import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** One level of a calibration set, named as in the instrument's sample column. */
export class CalibrationLevel extends Model<
  InferAttributes<CalibrationLevel>,
  InferCreationAttributes<CalibrationLevel>
> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare studyId: string;
  declare calibrationSetId: string;
  declare number: number;
  declare label: string;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

CalibrationLevel.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    calibrationSetId: { type: DataTypes.UUID, allowNull: false },
    number: { type: DataTypes.INTEGER, allowNull: false },
    label: { type: DataTypes.TEXT, allowNull: false },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'CalibrationLevel', tableName: 'calibration_levels' }
);
