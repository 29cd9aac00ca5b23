import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class CautionAcknowledgement extends Model<InferAttributes<CautionAcknowledgement>, InferCreationAttributes<CautionAcknowledgement>> {
  declare id: CreationOptional<string>;
  declare campaignId: string;
  declare code: string;
  declare message: string;
  declare personId: string;
  declare at: Date;
}

CautionAcknowledgement.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    campaignId: { type: DataTypes.BIGINT, allowNull: false },
    code: { type: DataTypes.TEXT, allowNull: false },
    message: { type: DataTypes.TEXT, allowNull: false },
    personId: { type: DataTypes.BIGINT, allowNull: false },
    at: { type: DataTypes.DATE, allowNull: false },
  },
  { sequelize, modelName: "CautionAcknowledgement", tableName: "caution_acknowledgement" },
);
