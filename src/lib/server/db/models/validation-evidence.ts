import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import type { ValidationPartKey } from '../../../domain/validation-parts';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** An experiment that stands for a part of the validation, of one variant or (null) of all. */
export class ValidationEvidence extends Model<
  InferAttributes<ValidationEvidence>,
  InferCreationAttributes<ValidationEvidence>
> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare studyId: string;
  declare part: ValidationPartKey;
  declare variantId: string | null;
  declare experimentId: string;
  declare reason: string;
  declare chosenBy: string;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

ValidationEvidence.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    part: { type: DataTypes.TEXT, allowNull: false },
    variantId: DataTypes.UUID,
    experimentId: { type: DataTypes.UUID, allowNull: false },
    reason: { type: DataTypes.TEXT, allowNull: false },
    chosenBy: { type: DataTypes.UUID, allowNull: false },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'ValidationEvidence', tableName: 'validation_evidence' }
);
