import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class Sensor extends Model<InferAttributes<Sensor>, InferCreationAttributes<Sensor>> {
  declare id: CreationOptional<string>;
  declare serial: string;
  declare kind: "wire" | "tube" | "fork" | "plate";
  declare readout: CreationOptional<"velocity" | "displacement">;
  declare nominalF0Hz: number;
  declare nominalQ: number;
  declare radiusM: CreationOptional<number | null>;
  declare note: CreationOptional<string | null>;
  declare createdAt: Date;
  declare retiredAt: CreationOptional<Date | null>;
}

Sensor.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    serial: { type: DataTypes.TEXT, allowNull: false },
    kind: { type: DataTypes.TEXT, allowNull: false },
    readout: { type: DataTypes.TEXT, allowNull: false, defaultValue: "velocity" },
    nominalF0Hz: { type: DataTypes.DOUBLE, allowNull: false },
    nominalQ: { type: DataTypes.DOUBLE, allowNull: false },
    radiusM: { type: DataTypes.DOUBLE },
    note: { type: DataTypes.TEXT },
    createdAt: { type: DataTypes.DATE, allowNull: false },
    retiredAt: { type: DataTypes.DATE },
  },
  { sequelize, modelName: "Sensor", tableName: "sensor" },
);
