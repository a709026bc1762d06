import { DataTypes, Model, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../sequelize';

/** What a file says about the peak of one measurement. Never changed; written by COPY, past this model. */
export class MeasurementQualifier extends Model<
  InferAttributes<MeasurementQualifier>,
  InferCreationAttributes<MeasurementQualifier>
> {
  declare labId: string;
  declare studyId: string;
  declare importId: string;
  declare injectionId: string;
  declare analyteId: string;
  declare retentionTimeMin: number | null;
  declare ionRatio: number | null;
  declare signalToNoise: number | null;
  declare isManual: boolean;
  declare manualCause: string | null;
}

MeasurementQualifier.init(
  {
    labId: { type: DataTypes.UUID, allowNull: false, primaryKey: true },
    studyId: { type: DataTypes.UUID, allowNull: false },
    importId: { type: DataTypes.UUID, allowNull: false },
    injectionId: { type: DataTypes.UUID, allowNull: false, primaryKey: true },
    analyteId: { type: DataTypes.UUID, allowNull: false, primaryKey: true },
    retentionTimeMin: DataTypes.DOUBLE,
    ionRatio: DataTypes.DOUBLE,
    signalToNoise: DataTypes.DOUBLE,
    isManual: { type: DataTypes.BOOLEAN, allowNull: false },
    manualCause: DataTypes.TEXT
  },
  { sequelize, modelName: 'MeasurementQualifier', tableName: 'measurement_qualifiers', timestamps: false }
);
