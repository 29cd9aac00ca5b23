import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";
import type { DateRange } from "@/models/json";

export class MaintenanceWindow extends Model<InferAttributes<MaintenanceWindow>, InferCreationAttributes<MaintenanceWindow>> {
  declare id: CreationOptional<string>;
  declare rigId: string;
  declare period: DateRange;
  declare why: string;
  declare createdBy: string;
  declare createdAt: Date;
  declare withdrawnAt: CreationOptional<Date | null>;
}

MaintenanceWindow.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    rigId: { type: DataTypes.BIGINT, allowNull: false },
    period: { type: DataTypes.RANGE(DataTypes.DATE), allowNull: false },
    why: { type: DataTypes.TEXT, allowNull: false },
    createdBy: { type: DataTypes.BIGINT, allowNull: false },
    createdAt: { type: DataTypes.DATE, allowNull: false },
    withdrawnAt: { type: DataTypes.DATE },
  },
  { sequelize, modelName: "MaintenanceWindow", tableName: "maintenance_window" },
);
