import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** One version of a column map. Never changed: an import says which one it was read by. */
export class ColumnMapVersion extends Model<
  InferAttributes<ColumnMapVersion>,
  InferCreationAttributes<ColumnMapVersion>
> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare columnMapId: string;
  declare version: number;
  declare map: unknown;
  declare savedBy: string;
  declare createdAt: CreationOptional<Date>;
}

ColumnMapVersion.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    columnMapId: { type: DataTypes.UUID, allowNull: false },
    version: { type: DataTypes.INTEGER, allowNull: false },
    map: { type: DataTypes.JSONB, allowNull: false },
    savedBy: { type: DataTypes.UUID, allowNull: false },
    createdAt: DataTypes.DATE
  },
  { sequelize, modelName: 'ColumnMapVersion', tableName: 'column_map_versions', updatedAt: false }
);
