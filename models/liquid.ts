import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";
import type { PropertyRow } from "@/models/json";

export class Liquid extends Model<InferAttributes<Liquid>, InferCreationAttributes<Liquid>> {
  declare id: CreationOptional<string>;
  declare name: string;
  declare letter: string;
  declare model: string;
  declare massFraction: CreationOptional<number | null>;
  declare propertyTable: CreationOptional<PropertyRow[] | null>;
  declare ghs: CreationOptional<string[]>;
  declare flashPointC: CreationOptional<number | null>;
  declare waste: CreationOptional<string | null>;
  declare notWith: CreationOptional<string[]>;
  declare createdAt: Date;
  declare retiredAt: CreationOptional<Date | null>;
}

Liquid.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    name: { type: DataTypes.TEXT, allowNull: false },
    letter: { type: DataTypes.TEXT, allowNull: false },
    model: { type: DataTypes.TEXT, allowNull: false },
    massFraction: { type: DataTypes.DOUBLE },
    propertyTable: { type: DataTypes.JSONB },
    ghs: { type: DataTypes.ARRAY(DataTypes.TEXT), allowNull: false, defaultValue: [] },
    flashPointC: { type: DataTypes.DOUBLE },
    waste: { type: DataTypes.TEXT },
    notWith: { type: DataTypes.ARRAY(DataTypes.TEXT), allowNull: false, defaultValue: [] },
    createdAt: { type: DataTypes.DATE, allowNull: false },
    retiredAt: { type: DataTypes.DATE },
  },
  { sequelize, modelName: "Liquid", tableName: "liquid" },
);
