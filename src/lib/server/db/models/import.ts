import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import type { ImportState } from '../../../domain/vocabulary';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** One uploaded file, kept byte for byte, and what came of it. */
export class Import extends Model<InferAttributes<Import>, InferCreationAttributes<Import>> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare studyId: string;
  declare fileName: string;
  declare fileBytes: Buffer;
  declare byteSize: number;
  declare sha256: string;
  declare declared: CreationOptional<Readonly<Record<string, unknown>>>;
  declare reading: unknown;
  declare sheetNames: CreationOptional<readonly string[]>;
  declare state: CreationOptional<ImportState>;
  declare counts: CreationOptional<Readonly<Record<string, number>>>;
  declare storedOrder: string | null;
  declare supersedesId: string | null;
  declare columnMapVersionId: string | null;
  declare receivedBy: string;
  declare receivedAt: CreationOptional<Date>;
  declare storedBy: string | null;
  declare storedAt: Date | null;
  declare endedBy: string | null;
  declare endedAt: Date | null;
  declare endReason: string | null;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

Import.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    fileName: { type: DataTypes.TEXT, allowNull: false },
    fileBytes: { type: DataTypes.BLOB, allowNull: false },
    byteSize: { type: DataTypes.INTEGER, allowNull: false },
    sha256: { type: DataTypes.TEXT, allowNull: false },
    declared: { type: DataTypes.JSONB, allowNull: false, defaultValue: {} },
    reading: DataTypes.JSONB,
    sheetNames: { type: DataTypes.ARRAY(DataTypes.TEXT), allowNull: false, defaultValue: [] },
    state: { type: DataTypes.TEXT, allowNull: false, defaultValue: 'received' },
    counts: { type: DataTypes.JSONB, allowNull: false, defaultValue: {} },
    storedOrder: DataTypes.BIGINT,
    supersedesId: DataTypes.UUID,
    columnMapVersionId: DataTypes.UUID,
    receivedBy: { type: DataTypes.UUID, allowNull: false },
    receivedAt: { type: DataTypes.DATE, allowNull: false, defaultValue: DataTypes.NOW },
    storedBy: DataTypes.UUID,
    storedAt: DataTypes.DATE,
    endedBy: DataTypes.UUID,
    endedAt: DataTypes.DATE,
    endReason: DataTypes.TEXT,
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'Import', tableName: 'imports' }
);
