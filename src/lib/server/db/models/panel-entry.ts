import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes
} from 'sequelize';
import type { CriteriaOverride } from '../../../domain/criteria';
import type { PanelRole } from '../../../domain/vocabulary';
import { entityId } from '../entity-id';
import { sequelize } from '../sequelize';

/** An analyte of a study, with its role and its internal standard. */
export class PanelEntry extends Model<InferAttributes<PanelEntry>, InferCreationAttributes<PanelEntry>> {
  declare id: CreationOptional<string>;
  declare labId: string;
  declare studyId: string;
  declare analyteId: string;
  declare analyteVersionId: string;
  declare role: PanelRole;
  declare position: number;
  declare internalStandardEntryId: string | null;
  declare criteriaOverride: CriteriaOverride | null;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

PanelEntry.init(
  {
    id: entityId(),
    labId: { type: DataTypes.UUID, allowNull: false },
    studyId: { type: DataTypes.UUID, allowNull: false },
    analyteId: { type: DataTypes.UUID, allowNull: false },
    analyteVersionId: { type: DataTypes.UUID, allowNull: false },
    role: { type: DataTypes.TEXT, allowNull: false },
    position: { type: DataTypes.INTEGER, allowNull: false },
    internalStandardEntryId: DataTypes.UUID,
    criteriaOverride: DataTypes.JSONB,
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE
  },
  { sequelize, modelName: 'PanelEntry', tableName: 'panel_entries' }
);
