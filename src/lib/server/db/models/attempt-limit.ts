import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import { sequelize } from '../sequelize';

/** Counters of the attempt limiter, which writes them itself. */
export class AttemptLimit extends Model<
  InferAttributes<AttemptLimit>,
  InferCreationAttributes<AttemptLimit>
> {
  declare key: string;
  declare points: CreationOptional<number>;
  declare expire: string | null;
}

AttemptLimit.init(
  {
    key: { type: DataTypes.STRING(255), allowNull: false, primaryKey: true },
    points: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    expire: DataTypes.BIGINT
  },
  { sequelize, modelName: 'AttemptLimit', tableName: 'attempt_limits', timestamps: false }
);
