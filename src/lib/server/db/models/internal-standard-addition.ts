import { DataTypes, Model, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import type { AdditionPoint } from '../../../domain/vocabulary';
import { sequelize } from '../sequelize';

/** How an internal standard enters the extracts, the vials or the samples of an experiment. */
export class InternalStandardAddition extends Model<
  InferAttributes<InternalStandardAddition>,
  InferCreationAttributes<InternalStandardAddition>
> {
  declare labId: string;
  declare studyId: string;
  declare experimentId: string;
  declare panelEntryId: string;
  declare point: AdditionPoint;
  declare amountNg: number | null;
  declare concentrationNgPerMl: number | null;
}

InternalStandardAddition.init(
  {
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    experimentId: { type: DataTypes.UUID, allowNull: false, primaryKey: true },
    panelEntryId: { type: DataTypes.UUID, allowNull: false, primaryKey: true },
    point: { type: DataTypes.TEXT, allowNull: false },
    amountNg: DataTypes.DOUBLE,
    concentrationNgPerMl: DataTypes.DOUBLE
  },
  {
    sequelize,
    modelName: 'InternalStandardAddition',
    tableName: 'internal_standard_additions',
    timestamps: false
  }
);
