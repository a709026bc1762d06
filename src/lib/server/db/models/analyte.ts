import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** A lasting entry of the library; what is known of it stands in its versions. */
export class Analyte extends Model<InferAttributes<Analyte>, InferCreationAttributes<Analyte>> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare currentVersionId: string | null;
  declare archivedAt: Date | null;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

Analyte.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    currentVersionId: DataTypes.UUID,
    archivedAt: DataTypes.DATE,
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'Analyte', tableName: 'analytes' }
);
