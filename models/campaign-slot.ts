import { DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class CampaignSlot extends Model<InferAttributes<CampaignSlot>, InferCreationAttributes<CampaignSlot>> {
  declare campaignId: string;
  declare slot: string;
  declare port: number;
  declare lotId: string;
}

CampaignSlot.init(
  {
    campaignId: { type: DataTypes.BIGINT, primaryKey: true },
    slot: { type: DataTypes.TEXT, primaryKey: true },
    port: { type: DataTypes.INTEGER, allowNull: false },
    lotId: { type: DataTypes.BIGINT, allowNull: false },
  },
  { sequelize, modelName: "CampaignSlot", tableName: "campaign_slot" },
);
