import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** A message that the local mail server took in, as the mailbox page shows it. */
export class MailboxMessage extends Model<
  InferAttributes<MailboxMessage>,
  InferCreationAttributes<MailboxMessage>
> {
  declare id: CreationOptional<string>;
  declare sender: string;
  declare recipients: string;
  declare subject: string;
  declare bodyText: string;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

MailboxMessage.init(
  {
    id: entityId(),
    sender: { type: DataTypes.TEXT, allowNull: false },
    recipients: { type: DataTypes.TEXT, allowNull: false },
    subject: { type: DataTypes.TEXT, allowNull: false },
    bodyText: { type: DataTypes.TEXT, allowNull: false },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'MailboxMessage', tableName: 'mailbox_messages' }
);
