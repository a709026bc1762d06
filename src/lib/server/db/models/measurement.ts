import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import type { MeasurementState, ReportedBasis } from '../../../domain/vocabulary';
import { sequelize } from '../sequelize';

/** One reported number and the cell it stood in. Never changed; written by COPY and read in bulk, past this model. */
export class Measurement extends Model<InferAttributes<Measurement>, InferCreationAttributes<Measurement>> {
  declare labId: string;
  declare id: CreationOptional<string>;
  declare importId: string;
  declare injectionId: string;
  declare experimentId: string | null;
  declare calibrationSetId: string | null;
  declare analyteId: string;
  declare basis: ReportedBasis;
  declare state: MeasurementState;
  declare reported: number | null;
  declare internalArea: number | null;
  declare internalAnalyteId: string | null;
  declare limitValue: number | null;
  declare rawText: string;
  declare sheet: number;
  declare sheetRow: number;
  declare sheetColumn: number;
}

Measurement.init(
  {
    labId: { type: DataTypes.UUID, allowNull: false, primaryKey: true },
    id: { type: DataTypes.BIGINT, allowNull: false, primaryKey: true, autoIncrement: true },
    importId: { type: DataTypes.UUID, allowNull: false },
    injectionId: { type: DataTypes.UUID, allowNull: false },
    experimentId: DataTypes.UUID,
    calibrationSetId: DataTypes.UUID,
    analyteId: { type: DataTypes.UUID, allowNull: false },
    basis: { type: DataTypes.TEXT, allowNull: false },
    state: { type: DataTypes.TEXT, allowNull: false },
    reported: DataTypes.DOUBLE,
    internalArea: DataTypes.DOUBLE,
    internalAnalyteId: DataTypes.UUID,
    limitValue: DataTypes.DOUBLE,
    rawText: { type: DataTypes.TEXT, allowNull: false },
    sheet: { type: DataTypes.SMALLINT, allowNull: false },
    sheetRow: { type: DataTypes.INTEGER, allowNull: false },
    sheetColumn: { type: DataTypes.SMALLINT, allowNull: false }
  },
  { sequelize, modelName: 'Measurement', tableName: 'measurements', timestamps: false }
);
