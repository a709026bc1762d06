import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import type { AccessScope } from '../../../domain/access-scopes';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** What a program signs its requests with; only the hash is kept. */
export class AccessKey extends Model<InferAttributes<AccessKey>, InferCreationAttributes<AccessKey>> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare userId: string;
  declare name: string;
  declare prefix: string;
  declare secretHash: string;
  declare scopes: readonly AccessScope[];
  declare expiresAt: Date | null;
  declare lastUsedAt: CreationOptional<Date | null>;
  declare revokedBy: CreationOptional<string | null>;
  declare revokedAt: CreationOptional<Date | null>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

AccessKey.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    userId: { type: DataTypes.UUID, allowNull: false },
    name: { type: DataTypes.TEXT, allowNull: false },
    prefix: { type: DataTypes.TEXT, allowNull: false },
    secretHash: { type: DataTypes.TEXT, allowNull: false },
    scopes: { type: DataTypes.ARRAY(DataTypes.TEXT), allowNull: false },
    expiresAt: DataTypes.DATE,
    lastUsedAt: DataTypes.DATE,
    revokedBy: DataTypes.UUID,
    revokedAt: DataTypes.DATE,
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'AccessKey', tableName: 'access_keys' }
);
