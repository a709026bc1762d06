import { DataTypes, Model, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../sequelize';

/** What one check standard holds of one panel entry, in ng/mL. */
export class CheckStandardConcentration extends Model<
  InferAttributes<CheckStandardConcentration>,
  InferCreationAttributes<CheckStandardConcentration>
> {
  declare labId: string;
  declare studyId: string;
  declare checkStandardId: string;
  declare panelEntryId: string;
  declare concentrationNgPerMl: number;
}

CheckStandardConcentration.init(
  {
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    checkStandardId: { type: DataTypes.UUID, allowNull: false, primaryKey: true },
    panelEntryId: { type: DataTypes.UUID, allowNull: false, primaryKey: true },
    concentrationNgPerMl: { type: DataTypes.DOUBLE, allowNull: false }
  },
  {
    sequelize,
    modelName: 'CheckStandardConcentration',
    tableName: 'check_standard_concentrations',
    timestamps: false
  }
);
