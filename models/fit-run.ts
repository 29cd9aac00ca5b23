import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";
import type { FitSettings } from "@/models/json";

export class FitRun extends Model<InferAttributes<FitRun>, InferCreationAttributes<FitRun>> {
  declare id: CreationOptional<string>;
  declare campaignId: string;
  declare settings: FitSettings;
  declare codeVersion: string;
  declare current: boolean;
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
    createdBy: { type: DataTypes.BIGINT },
    createdAt: { type: DataTypes.DATE, allowNull: false },
  },
  { sequelize, modelName: "FitRun", tableName: "fit_run" },
);
