import { DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class Setting extends Model<InferAttributes<Setting>, InferCreationAttributes<Setting>> {
  declare name: string;
  declare value: unknown;
}

Setting.init(
  {
    name: { type: DataTypes.TEXT, primaryKey: true },
    value: { type: DataTypes.JSONB, allowNull: false },
  },
  { sequelize, modelName: "Setting", tableName: "setting" },
);
