import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** Two preparations of one experiment that were made as duplicates of each other. */
export class DuplicatePair extends Model<
  InferAttributes<DuplicatePair>,
  InferCreationAttributes<DuplicatePair>
> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare studyId: string;
  declare experimentId: string;
  declare firstReplicateId: string;
  declare secondReplicateId: string;
  declare reason: string;
  declare declaredBy: string;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

DuplicatePair.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    experimentId: { type: DataTypes.UUID, allowNull: false },
    firstReplicateId: { type: DataTypes.UUID, allowNull: false },
    secondReplicateId: { type: DataTypes.UUID, allowNull: false },
    reason: { type: DataTypes.TEXT, allowNull: false },
    declaredBy: { type: DataTypes.UUID, allowNull: false },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'DuplicatePair', tableName: 'duplicate_pairs' }
);
