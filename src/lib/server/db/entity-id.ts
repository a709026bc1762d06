import { DataTypes } from 'sequelize';
import { v7 } from 'uuid';

/** A new id for a row: UUIDv7, so that rows made after each other lie beside each other in the index. */
export function newId(): string {
  return v7();
}

/** The `id` column of an entity. */
export function entityId() {
  return { type: DataTypes.UUID, allowNull: false, primaryKey: true, defaultValue: newId };
}
