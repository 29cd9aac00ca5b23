import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class Exclusion extends Model<InferAttributes<Exclusion>, InferCreationAttributes<Exclusion>> {
  declare id: CreationOptional<string>;
  declare stepId: string;
  declare idx: number;
  declare personId: string;
  declare at: Date;
  declare why: string;
  declare undoneBy: CreationOptional<string | null>;
  declare undoneAt: CreationOptional<Date | null>;
}

Exclusion.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    stepId: { type: DataTypes.BIGINT, allowNull: false },
    idx: { type: DataTypes.INTEGER, allowNull: false },
    personId: { type: DataTypes.BIGINT, allowNull: false },
    at: { type: DataTypes.DATE, allowNull: false },
    why: { type: DataTypes.TEXT, allowNull: false },
    undoneBy: { type: DataTypes.BIGINT },
    undoneAt: { type: DataTypes.DATE },
  },
  { sequelize, modelName: "Exclusion", tableName: "exclusion" },
);
