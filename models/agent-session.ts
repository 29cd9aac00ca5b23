import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class AgentSession extends Model<InferAttributes<AgentSession>, InferCreationAttributes<AgentSession>> {
  declare id: CreationOptional<string>;
  declare rigId: string;
  declare agentTokenId: string;
  declare session: string;
  declare agentName: string;
  declare agentVersion: string;
  declare instance: CreationOptional<string | null>;
  declare repeatable: CreationOptional<string[]>;
  declare startedAt: Date;
  declare lastSeenAt: Date;
  declare endedAt: CreationOptional<Date | null>;
}

AgentSession.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    rigId: { type: DataTypes.BIGINT, allowNull: false },
    agentTokenId: { type: DataTypes.BIGINT, allowNull: false },
    session: { type: DataTypes.TEXT, allowNull: false },
    agentName: { type: DataTypes.TEXT, allowNull: false },
    agentVersion: { type: DataTypes.TEXT, allowNull: false },
    instance: { type: DataTypes.TEXT },
    repeatable: { type: DataTypes.ARRAY(DataTypes.TEXT), allowNull: false, defaultValue: [] },
    startedAt: { type: DataTypes.DATE, allowNull: false },
    lastSeenAt: { type: DataTypes.DATE, allowNull: false },
    endedAt: { type: DataTypes.DATE },
  },
  { sequelize, modelName: "AgentSession", tableName: "agent_session" },
);
