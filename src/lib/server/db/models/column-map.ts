import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** A layout of spreadsheets that a lab knows under a name. */
export class ColumnMapRow extends Model<
  InferAttributes<ColumnMapRow>,
  InferCreationAttributes<ColumnMapRow>
> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare name: string;
  declare retiredAt: CreationOptional<Date | null>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

ColumnMapRow.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    name: { type: DataTypes.TEXT, allowNull: false },
    retiredAt: DataTypes.DATE,
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'ColumnMap', tableName: 'column_maps' }
);
