import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class Load extends Model<InferAttributes<Load>, InferCreationAttributes<Load>> {
  declare id: CreationOptional<string>;
  declare rigId: string;
  declare port: number;
  declare lotId: string;
  declare volumeMl: number;
  declare how: "replace" | "topUp";
  declare loadedBy: CreationOptional<string | null>;
  declare loadedAt: Date;
}

Load.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    rigId: { type: DataTypes.BIGINT, allowNull: false },
    port: { type: DataTypes.INTEGER, allowNull: false },
    lotId: { type: DataTypes.BIGINT, allowNull: false },
    volumeMl: { type: DataTypes.DOUBLE, allowNull: false },
    how: { type: DataTypes.TEXT, allowNull: false },
    loadedBy: { type: DataTypes.BIGINT },
    loadedAt: { type: DataTypes.DATE, allowNull: false },
  },
  { sequelize, modelName: "Load", tableName: "load" },
);
