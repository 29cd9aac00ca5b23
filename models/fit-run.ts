import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";
import type { FitSettings, FoundOnRefit } from "@/models/json";

export class FitRun extends Model<InferAttributes<FitRun>, InferCreationAttributes<FitRun>> {
  declare id: CreationOptional<string>;
  declare campaignId: string;
  declare settings: FitSettings;
  declare codeVersion: string;
  declare current: boolean;
  declare state: CreationOptional<"waiting" | "ready" | "cancelled">;
  /** Readings to fit, and those fitted. */
  declare total: CreationOptional<number>;
  declare done: CreationOptional<number>;
  declare why: CreationOptional<string | null>;
  declare finishedAt: CreationOptional<Date | null>;
  declare found: CreationOptional<FoundOnRefit[]>;
  declare createdBy: CreationOptional<string | null>;
  declare createdAt: Date;
}

FitRun.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    campaignId: { type: DataTypes.BIGINT, allowNull: false },
    settings: { type: DataTypes.JSONB, allowNull: false },
    codeVersion: { type: DataTypes.TEXT, allowNull: false },
    current: { type: DataTypes.BOOLEAN, allowNull: false },
    state: { type: DataTypes.TEXT, allowNull: false, defaultValue: "ready" },
    total: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    done: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    why: { type: DataTypes.TEXT },
    finishedAt: { type: DataTypes.DATE },
    found: { type: DataTypes.JSONB, allowNull: false, defaultValue: [] },
    createdBy: { type: DataTypes.BIGINT },
    createdAt: { type: DataTypes.DATE, allowNull: false },
  },
  { sequelize, modelName: "FitRun", tableName: "fit_run" },
);
