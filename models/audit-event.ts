import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class AuditEvent extends Model<InferAttributes<AuditEvent>, InferCreationAttributes<AuditEvent>> {
  declare id: CreationOptional<string>;
  declare at: Date;
  declare personId: CreationOptional<string | null>;
  declare rigId: CreationOptional<string | null>;
  declare who: string;
  declare action: string;
  declare entity: string;
  declare entityId: string;
  declare detail: CreationOptional<Record<string, unknown>>;
  declare requestId: CreationOptional<string | null>;
}

AuditEvent.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    at: { type: DataTypes.DATE, allowNull: false },
    personId: { type: DataTypes.BIGINT },
    rigId: { type: DataTypes.BIGINT },
    who: { type: DataTypes.TEXT, allowNull: false },
    action: { type: DataTypes.TEXT, allowNull: false },
    entity: { type: DataTypes.TEXT, allowNull: false },
    entityId: { type: DataTypes.TEXT, allowNull: false },
    detail: { type: DataTypes.JSONB, allowNull: false, defaultValue: {} },
    requestId: { type: DataTypes.TEXT },
  },
  { sequelize, modelName: "AuditEvent", tableName: "audit_event" },
);
