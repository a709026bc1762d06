import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** One run of the instrument, as one import brought it. Never changed. */
export class Sequence extends Model<InferAttributes<Sequence>, InferCreationAttributes<Sequence>> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare studyId: string;
  declare importId: string;
  declare instrument: string;
  declare runOn: string | null;
  declare createdAt: CreationOptional<Date>;
}

Sequence.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    importId: { type: DataTypes.UUID, allowNull: false },
    instrument: { type: DataTypes.TEXT, allowNull: false },
    runOn: DataTypes.DATEONLY,
    createdAt: DataTypes.DATE
  },
  { sequelize, modelName: 'Sequence', tableName: 'sequences', updatedAt: false }
);
