import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class Alarm extends Model<InferAttributes<Alarm>, InferCreationAttributes<Alarm>> {
  declare id: CreationOptional<string>;
  declare campaignId: CreationOptional<string | null>;
  declare rigId: string;
  declare sensorId: CreationOptional<string | null>;
  declare source: "limit" | "system";
  declare limitId: CreationOptional<string | null>;
  declare kind: string;
  declare state: "unacknowledged" | "acknowledged" | "returned" | "cleared";
  declare shelvedUntil: CreationOptional<Date | null>;
  declare openedAt: Date;
  declare openedClock: CreationOptional<Date | null>;
  declare phaseId: CreationOptional<string | null>;
  declare stepId: CreationOptional<string | null>;
  declare fitRunId: CreationOptional<string | null>;
  declare value: CreationOptional<number | null>;
  declare limitValue: CreationOptional<number | null>;
  declare unit: CreationOptional<string | null>;
  declare text: string;
  declare actionText: CreationOptional<string | null>;
  declare foundOnRefit: CreationOptional<boolean>;
  declare acknowledgedBy: CreationOptional<string | null>;
  declare acknowledgedAt: CreationOptional<Date | null>;
  declare returnedAt: CreationOptional<Date | null>;
  declare clearedBy: CreationOptional<string | null>;
  declare clearedAt: CreationOptional<Date | null>;
  declare clearNote: CreationOptional<string | null>;
}

Alarm.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    campaignId: { type: DataTypes.BIGINT },
    rigId: { type: DataTypes.BIGINT, allowNull: false },
    sensorId: { type: DataTypes.BIGINT },
    source: { type: DataTypes.TEXT, allowNull: false },
    limitId: { type: DataTypes.TEXT },
    kind: { type: DataTypes.TEXT, allowNull: false },
    state: { type: DataTypes.TEXT, allowNull: false },
    shelvedUntil: { type: DataTypes.DATE },
    openedAt: { type: DataTypes.DATE, allowNull: false },
    openedClock: { type: DataTypes.DATE },
    phaseId: { type: DataTypes.BIGINT },
    stepId: { type: DataTypes.BIGINT },
    fitRunId: { type: DataTypes.BIGINT },
    value: { type: DataTypes.DOUBLE },
    limitValue: { type: DataTypes.DOUBLE },
    unit: { type: DataTypes.TEXT },
    text: { type: DataTypes.TEXT, allowNull: false },
    actionText: { type: DataTypes.TEXT },
    foundOnRefit: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false },
    acknowledgedBy: { type: DataTypes.BIGINT },
    acknowledgedAt: { type: DataTypes.DATE },
    returnedAt: { type: DataTypes.DATE },
    clearedBy: { type: DataTypes.BIGINT },
    clearedAt: { type: DataTypes.DATE },
    clearNote: { type: DataTypes.TEXT },
  },
  { sequelize, modelName: "Alarm", tableName: "alarm" },
);
