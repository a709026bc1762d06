import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** What the library said of an analyte at one time. Never changed. */
export class AnalyteVersion extends Model<
  InferAttributes<AnalyteVersion>,
  InferCreationAttributes<AnalyteVersion>
> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare analyteId: string;
  declare version: number;
  declare name: string;
  declare synonyms: CreationOptional<readonly string[]>;
  declare cas: string | null;
  declare smiles: string | null;
  declare formula: string | null;
  declare molarMass: number | null;
  declare logKow: number | null;
  declare pkaAcid: CreationOptional<readonly number[]>;
  declare pkaBase: CreationOptional<readonly number[]>;
  declare boilingPointC: number | null;
  declare vapourPressurePa: number | null;
  declare henryPaM3Mol: number | null;
  declare waterSolubilityMgL: number | null;
  declare class: string | null;
  declare sources: CreationOptional<Readonly<Record<string, string>>>;
  declare note: string | null;
  declare createdBy: string | null;
  declare createdAt: CreationOptional<Date>;
}

AnalyteVersion.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    analyteId: { type: DataTypes.UUID, allowNull: false },
    version: { type: DataTypes.INTEGER, allowNull: false },
    name: { type: DataTypes.TEXT, allowNull: false },
    synonyms: { type: DataTypes.ARRAY(DataTypes.TEXT), allowNull: false, defaultValue: [] },
    cas: DataTypes.TEXT,
    smiles: DataTypes.TEXT,
    formula: DataTypes.TEXT,
    molarMass: DataTypes.DOUBLE,
    logKow: DataTypes.DOUBLE,
    pkaAcid: { type: DataTypes.ARRAY(DataTypes.DOUBLE), allowNull: false, defaultValue: [] },
    pkaBase: { type: DataTypes.ARRAY(DataTypes.DOUBLE), allowNull: false, defaultValue: [] },
    boilingPointC: DataTypes.DOUBLE,
    vapourPressurePa: DataTypes.DOUBLE,
    henryPaM3Mol: DataTypes.DOUBLE,
    waterSolubilityMgL: DataTypes.DOUBLE,
    class: DataTypes.TEXT,
    sources: { type: DataTypes.JSONB, allowNull: false, defaultValue: {} },
    note: DataTypes.TEXT,
    createdBy: DataTypes.UUID,
    createdAt: DataTypes.DATE
  },
  { sequelize, modelName: 'AnalyteVersion', tableName: 'analyte_versions', updatedAt: false }
);
