import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class Heartbeat extends Model<InferAttributes<Heartbeat>, InferCreationAttributes<Heartbeat>> {
  declare id: CreationOptional<string>;
  declare rigId: string;
  declare at: Date;
  declare clock: Date;
  declare offsetMs: CreationOptional<number | null>;
  declare state: string;
  declare stepId: CreationOptional<string | null>;
  declare temperatureC: CreationOptional<number | null>;
  declare wasteMl: CreationOptional<number | null>;
  declare message: CreationOptional<string | null>;
}

Heartbeat.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    rigId: { type: DataTypes.BIGINT, allowNull: false },
    at: { type: DataTypes.DATE, allowNull: false },
    clock: { type: DataTypes.DATE, allowNull: false },
    offsetMs: { type: DataTypes.DOUBLE },
    state: { type: DataTypes.TEXT, allowNull: false },
    stepId: { type: DataTypes.BIGINT },
    temperatureC: { type: DataTypes.DOUBLE },
    wasteMl: { type: DataTypes.DOUBLE },
    message: { type: DataTypes.TEXT },
  },
  { sequelize, modelName: "Heartbeat", tableName: "heartbeat" },
);
