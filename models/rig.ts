import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";
import type { AgentAbilities } from "@/models/json";

export class Rig extends Model<InferAttributes<Rig>, InferCreationAttributes<Rig>> {
  declare id: CreationOptional<string>;
  declare name: string;
  declare timeZone: string;
  declare clock: CreationOptional<"real" | "simulated">;
  declare ports: number;
  declare wasteCapacityMl: CreationOptional<number | null>;
  declare wasteMl: CreationOptional<number>;
  declare abilities: CreationOptional<AgentAbilities | null>;
  declare agentState: CreationOptional<"idle" | "working" | "fault" | null>;
  declare agentMessage: CreationOptional<string | null>;
  declare temperatureC: CreationOptional<number | null>;
  declare lastContactAt: CreationOptional<Date | null>;
  declare reportedClock: CreationOptional<Date | null>;
  declare clockOffsetMs: CreationOptional<number | null>;
  declare campaignsStarted: CreationOptional<number>;
  declare createdAt: Date;
  declare retiredAt: CreationOptional<Date | null>;
}

Rig.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    name: { type: DataTypes.TEXT, allowNull: false },
    timeZone: { type: DataTypes.TEXT, allowNull: false },
    clock: { type: DataTypes.TEXT, allowNull: false, defaultValue: "real" },
    ports: { type: DataTypes.INTEGER, allowNull: false },
    wasteCapacityMl: { type: DataTypes.DOUBLE },
    wasteMl: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 0 },
    abilities: { type: DataTypes.JSONB },
    agentState: { type: DataTypes.TEXT },
    agentMessage: { type: DataTypes.TEXT },
    temperatureC: { type: DataTypes.DOUBLE },
    lastContactAt: { type: DataTypes.DATE },
    reportedClock: { type: DataTypes.DATE },
    clockOffsetMs: { type: DataTypes.DOUBLE },
    campaignsStarted: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: { type: DataTypes.DATE, allowNull: false },
    retiredAt: { type: DataTypes.DATE },
  },
  { sequelize, modelName: "Rig", tableName: "rig" },
);
