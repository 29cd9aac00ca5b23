import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class AgentToken extends Model<InferAttributes<AgentToken>, InferCreationAttributes<AgentToken>> {
  declare id: CreationOptional<string>;
  declare rigId: string;
  declare name: string;
  declare tokenHash: Buffer;
  declare last4: string;
  declare createdBy: CreationOptional<string | null>;
  declare createdAt: Date;
  declare lastUsedAt: CreationOptional<Date | null>;
  declare revokedAt: CreationOptional<Date | null>;
}

AgentToken.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    rigId: { type: DataTypes.BIGINT, allowNull: false },
    name: { type: DataTypes.TEXT, allowNull: false },
    tokenHash: { type: DataTypes.BLOB, allowNull: false },
    last4: { type: DataTypes.TEXT, allowNull: false },
    createdBy: { type: DataTypes.BIGINT },
    createdAt: { type: DataTypes.DATE, allowNull: false },
    lastUsedAt: { type: DataTypes.DATE },
    revokedAt: { type: DataTypes.DATE },
  },
  { sequelize, modelName: "AgentToken", tableName: "agent_token" },
);
