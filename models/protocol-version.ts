import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";
import type { Definition } from "@/lib/protocol/schema";

export class ProtocolVersion extends Model<InferAttributes<ProtocolVersion>, InferCreationAttributes<ProtocolVersion>> {
  declare id: CreationOptional<string>;
  declare protocolId: string;
  declare version: number;
  declare definition: Definition;
  declare note: CreationOptional<string | null>;
  declare createdBy: CreationOptional<string | null>;
  declare createdAt: Date;
}

ProtocolVersion.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    protocolId: { type: DataTypes.BIGINT, allowNull: false },
    version: { type: DataTypes.INTEGER, allowNull: false },
    definition: { type: DataTypes.JSONB, allowNull: false },
    note: { type: DataTypes.TEXT },
    createdBy: { type: DataTypes.BIGINT },
    createdAt: { type: DataTypes.DATE, allowNull: false },
  },
  { sequelize, modelName: "ProtocolVersion", tableName: "protocol_version" },
);
