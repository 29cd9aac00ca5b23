import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class Hold extends Model<InferAttributes<Hold>, InferCreationAttributes<Hold>> {
  declare id: CreationOptional<string>;
  declare campaignId: string;
  declare reason: "person" | "task" | "limit" | "failure" | "silence" | "takeOver" | "setAside";
  declare text: string;
  declare openedBy: CreationOptional<string | null>;
  declare openedAt: Date;
  declare openedClock: CreationOptional<Date | null>;
  declare releasedBy: CreationOptional<string | null>;
  declare releasedAt: CreationOptional<Date | null>;
  declare releasedClock: CreationOptional<Date | null>;
}

Hold.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    campaignId: { type: DataTypes.BIGINT, allowNull: false },
    reason: { type: DataTypes.TEXT, allowNull: false },
    text: { type: DataTypes.TEXT, allowNull: false },
    openedBy: { type: DataTypes.BIGINT },
    openedAt: { type: DataTypes.DATE, allowNull: false },
    openedClock: { type: DataTypes.DATE },
    releasedBy: { type: DataTypes.BIGINT },
    releasedAt: { type: DataTypes.DATE },
    releasedClock: { type: DataTypes.DATE },
  },
  { sequelize, modelName: "Hold", tableName: "hold" },
);
