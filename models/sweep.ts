import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class Sweep extends Model<InferAttributes<Sweep>, InferCreationAttributes<Sweep>> {
  declare stepId: string;
  declare idx: number;
  declare startHz: CreationOptional<number | null>;
  declare stopHz: CreationOptional<number | null>;
  declare points: number;
  declare data: Buffer;
}

Sweep.init(
  {
    stepId: { type: DataTypes.BIGINT, primaryKey: true },
    idx: { type: DataTypes.INTEGER, primaryKey: true },
    startHz: { type: DataTypes.DOUBLE },
    stopHz: { type: DataTypes.DOUBLE },
    points: { type: DataTypes.INTEGER, allowNull: false },
    data: { type: DataTypes.BLOB, allowNull: false },
  },
  { sequelize, modelName: "Sweep", tableName: "sweep" },
);
