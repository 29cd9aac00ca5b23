import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";
import type { Cursor } from "@/lib/protocol/types";
import type { PlannedCampaign } from "@/models/json";

export class Campaign extends Model<InferAttributes<Campaign>, InferCreationAttributes<Campaign>> {
  declare id: CreationOptional<string>;
  declare rigNumber: CreationOptional<number | null>;
  declare name: string;
  declare protocolVersionId: CreationOptional<string | null>;
  declare sensorId: CreationOptional<string | null>;
  declare rigId: CreationOptional<string | null>;
  declare mountId: CreationOptional<string | null>;
  declare state: "draft" | "queued" | "running" | "held" | "finished" | "stopped" | "failed";
  declare origin: CreationOptional<"protocol" | "import">;
  declare priority: CreationOptional<number>;
  declare startAt: CreationOptional<Date | null>;
  declare createdBy: CreationOptional<string | null>;
  declare createdAt: Date;
  declare queuedAt: CreationOptional<Date | null>;
  declare startedAt: CreationOptional<Date | null>;
  declare startedClock: CreationOptional<Date | null>;
  declare endedAt: CreationOptional<Date | null>;
  declare endedClock: CreationOptional<Date | null>;
  declare endText: CreationOptional<string | null>;
  declare cursor: CreationOptional<Cursor | null>;
  declare cursorText: CreationOptional<string | null>;
  declare parking: CreationOptional<"none" | "wanted" | "running" | "parked">;
  declare setAside: CreationOptional<boolean>;
  declare needsAdvance: CreationOptional<boolean>;
  declare planned: CreationOptional<PlannedCampaign | null>;
}

Campaign.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    rigNumber: { type: DataTypes.INTEGER },
    name: { type: DataTypes.TEXT, allowNull: false },
    protocolVersionId: { type: DataTypes.BIGINT },
    sensorId: { type: DataTypes.BIGINT },
    rigId: { type: DataTypes.BIGINT },
    mountId: { type: DataTypes.BIGINT },
    state: { type: DataTypes.TEXT, allowNull: false },
    origin: { type: DataTypes.TEXT, allowNull: false, defaultValue: "protocol" },
    priority: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    startAt: { type: DataTypes.DATE },
    createdBy: { type: DataTypes.BIGINT },
    createdAt: { type: DataTypes.DATE, allowNull: false },
    queuedAt: { type: DataTypes.DATE },
    startedAt: { type: DataTypes.DATE },
    startedClock: { type: DataTypes.DATE },
    endedAt: { type: DataTypes.DATE },
    endedClock: { type: DataTypes.DATE },
    endText: { type: DataTypes.TEXT },
    cursor: { type: DataTypes.JSONB },
    cursorText: { type: DataTypes.TEXT },
    parking: { type: DataTypes.TEXT, allowNull: false, defaultValue: "none" },
    setAside: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false },
    needsAdvance: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false },
    planned: { type: DataTypes.JSONB },
  },
  { sequelize, modelName: "Campaign", tableName: "campaign" },
);
