import { DataTypes, Model, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../sequelize';

/** One link of a lab's audit chain. Written by `inTransaction` alone; never changed or deleted. */
export class AuditEvent extends Model<InferAttributes<AuditEvent>, InferCreationAttributes<AuditEvent>> {
  declare labId: string;
  declare seq: string;
  declare studyId: string | null;
  declare actorId: string | null;
  declare actorName: string;
  declare action: string;
  declare entity: string;
  declare entityId: string | null;
  declare sentence: string;
  declare before: unknown;
  declare after: unknown;
  declare reason: string | null;
  declare at: Date;
  declare previousHash: string;
  declare hash: string;
}

AuditEvent.init(
  {
    labId: { type: DataTypes.UUID, allowNull: false, primaryKey: true },
    seq: { type: DataTypes.BIGINT, allowNull: false, primaryKey: true },
    studyId: DataTypes.UUID,
    actorId: DataTypes.UUID,
    actorName: { type: DataTypes.TEXT, allowNull: false },
    action: { type: DataTypes.TEXT, allowNull: false },
    entity: { type: DataTypes.TEXT, allowNull: false },
    entityId: DataTypes.TEXT,
    sentence: { type: DataTypes.TEXT, allowNull: false },
    before: DataTypes.JSONB,
    after: DataTypes.JSONB,
    reason: DataTypes.TEXT,
    at: { type: DataTypes.DATE, allowNull: false },
    previousHash: { type: DataTypes.TEXT, allowNull: false },
    hash: { type: DataTypes.TEXT, allowNull: false }
  },
  { sequelize, modelName: 'AuditEvent', tableName: 'audit_events', timestamps: false }
);
