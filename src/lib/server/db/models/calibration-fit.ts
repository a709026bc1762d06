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

/** How one analyte of a set is fitted: a choice with its reason, in revisions. Never changed. */
export class CalibrationFit extends Model<
  InferAttributes<CalibrationFit>,
  InferCreationAttributes<CalibrationFit>
> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare studyId: string;
  declare calibrationSetId: string;
  declare panelEntryId: string;
  declare revision: number;
  declare model: CalibrationModelName;
  declare weighting: CalibrationWeighting;
  declare levelsLeftOut: CreationOptional<readonly string[]>;
  declare reason: string;
  declare chosenBy: string;
  declare createdAt: CreationOptional<Date>;
}

CalibrationFit.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    calibrationSetId: { type: DataTypes.UUID, allowNull: false },
    panelEntryId: { type: DataTypes.UUID, allowNull: false },
    revision: { type: DataTypes.INTEGER, allowNull: false },
    model: { type: DataTypes.TEXT, allowNull: false },
    weighting: { type: DataTypes.TEXT, allowNull: false },
    levelsLeftOut: { type: DataTypes.ARRAY(DataTypes.UUID), allowNull: false, defaultValue: [] },
    reason: { type: DataTypes.TEXT, allowNull: false },
    chosenBy: { type: DataTypes.UUID, allowNull: false },
    createdAt: DataTypes.DATE
  },
  { sequelize, modelName: 'CalibrationFit', tableName: 'calibration_fits', updatedAt: false }
);
