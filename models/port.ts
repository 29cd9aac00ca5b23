import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class Port extends Model<InferAttributes<Port>, InferCreationAttributes<Port>> {
  declare rigId: string;
  declare number: number;
  declare loadId: CreationOptional<string | null>;
  declare remainingMl: CreationOptional<number>;
}

Port.init(
  {
    rigId: { type: DataTypes.BIGINT, primaryKey: true },
    number: { type: DataTypes.INTEGER, primaryKey: true },
    loadId: { type: DataTypes.BIGINT },
    remainingMl: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 0 },
  },
  { sequelize, modelName: "Port", tableName: "port" },
);
