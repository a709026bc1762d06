import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** A message on its way out; its body is emptied once it has left. */
export class OutboxMessage extends Model<
  InferAttributes<OutboxMessage>,
  InferCreationAttributes<OutboxMessage>
> {
  declare id: CreationOptional<string>;
  declare labId: string | null;
  declare template: 'invitation' | 'password reset';
  declare recipient: string;
  declare subject: string;
  declare bodyText: string;
  declare bodyHtml: string;
  declare sentAt: CreationOptional<Date | null>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

OutboxMessage.init(
  {
    id: entityId(),
    labId: DataTypes.UUID,
    template: { type: DataTypes.TEXT, allowNull: false },
    recipient: { type: DataTypes.TEXT, allowNull: false },
    subject: { type: DataTypes.TEXT, allowNull: false },
    bodyText: { type: DataTypes.TEXT, allowNull: false },
    bodyHtml: { type: DataTypes.TEXT, allowNull: false },
    sentAt: DataTypes.DATE,
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'OutboxMessage', tableName: 'outbox_messages' }
);
