import { DataTypes, Model, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../sequelize';

/** What one level holds of one panel entry, in ng/mL. */
export class CalibrationLevelConcentration extends Model<
  InferAttributes<CalibrationLevelConcentration>,
  InferCreationAttributes<CalibrationLevelConcentration>
> {
  declare labId: string;
  declare studyId: string;
  declare levelId: string;
  declare panelEntryId: string;
  declare concentrationNgPerMl: number;
}

CalibrationLevelConcentration.init(
  {
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    levelId: { type: DataTypes.UUID, allowNull: false, primaryKey: true },
    panelEntryId: { type: DataTypes.UUID, allowNull: false, primaryKey: true },
    concentrationNgPerMl: { type: DataTypes.DOUBLE, allowNull: false }
  },
  {
    sequelize,
    modelName: 'CalibrationLevelConcentration',
    tableName: 'calibration_level_concentrations',
    timestamps: false
  }
);
