import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class CampaignNote extends Model<InferAttributes<CampaignNote>, InferCreationAttributes<CampaignNote>> {
  declare id: CreationOptional<string>;
  declare campaignId: string;
  declare personId: string;
  declare text: string;
  declare at: Date;
}

CampaignNote.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    campaignId: { type: DataTypes.BIGINT, allowNull: false },
    personId: { type: DataTypes.BIGINT, allowNull: false },
    text: { type: DataTypes.TEXT, allowNull: false },
    at: { type: DataTypes.DATE, allowNull: false },
  },
  { sequelize, modelName: "CampaignNote", tableName: "campaign_note" },
);
