import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";
import type { Cursor } from "@/lib/protocol/types";

export class Amendment extends Model<InferAttributes<Amendment>, InferCreationAttributes<Amendment>> {
  declare id: CreationOptional<string>;
  declare campaignId: string;
  declare fromSequence: number;
  declare fromVersionId: string;
  declare toVersionId: string;
  declare cursorBefore: Cursor;
  declare cursorAfter: Cursor;
  declare why: string;
  declare personId: string;
  declare at: Date;
}

Amendment.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    campaignId: { type: DataTypes.BIGINT, allowNull: false },
    fromSequence: { type: DataTypes.INTEGER, allowNull: false },
    fromVersionId: { type: DataTypes.BIGINT, allowNull: false },
    toVersionId: { type: DataTypes.BIGINT, allowNull: false },
    cursorBefore: { type: DataTypes.JSONB, allowNull: false },
    cursorAfter: { type: DataTypes.JSONB, allowNull: false },
    why: { type: DataTypes.TEXT, allowNull: false },
    personId: { type: DataTypes.BIGINT, allowNull: false },
    at: { type: DataTypes.DATE, allowNull: false },
  },
  { sequelize, modelName: "Amendment", tableName: "amendment" },
);
