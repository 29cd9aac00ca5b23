import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class CampaignEvent extends Model<InferAttributes<CampaignEvent>, InferCreationAttributes<CampaignEvent>> {
  declare id: CreationOptional<string>;
  declare campaignId: string;
  declare at: Date;
  declare clock: CreationOptional<Date | null>;
  declare kind: string;
  declare who: string;
  declare text: string;
  declare sequence: CreationOptional<number | null>;
  declare readingIndex: CreationOptional<number | null>;
}

CampaignEvent.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    campaignId: { type: DataTypes.BIGINT, allowNull: false },
    at: { type: DataTypes.DATE, allowNull: false },
    clock: { type: DataTypes.DATE },
    kind: { type: DataTypes.TEXT, allowNull: false },
    who: { type: DataTypes.TEXT, allowNull: false },
    text: { type: DataTypes.TEXT, allowNull: false },
    sequence: { type: DataTypes.INTEGER },
    readingIndex: { type: DataTypes.INTEGER },
  },
  { sequelize, modelName: "CampaignEvent", tableName: "campaign_event" },
);
