import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class Protocol extends Model<InferAttributes<Protocol>, InferCreationAttributes<Protocol>> {
  declare id: CreationOptional<string>;
  declare name: string;
  declare draft: CreationOptional<Record<string, unknown> | null>;
  declare draftSavedAt: CreationOptional<Date | null>;
  declare createdBy: CreationOptional<string | null>;
  declare createdAt: Date;
  declare retiredAt: CreationOptional<Date | null>;
}

Protocol.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    name: { type: DataTypes.TEXT, allowNull: false },
    draft: { type: DataTypes.JSONB },
    draftSavedAt: { type: DataTypes.DATE },
    createdBy: { type: DataTypes.BIGINT },
    createdAt: { type: DataTypes.DATE, allowNull: false },
    retiredAt: { type: DataTypes.DATE },
  },
  { sequelize, modelName: "Protocol", tableName: "protocol" },
);
