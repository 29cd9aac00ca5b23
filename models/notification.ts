import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class Notification extends Model<InferAttributes<Notification>, InferCreationAttributes<Notification>> {
  declare id: CreationOptional<string>;
  declare alarmId: CreationOptional<string | null>;
  declare operatorTaskId: CreationOptional<string | null>;
  declare campaignId: CreationOptional<string | null>;
  declare personId: string;
  declare kind: string;
  declare address: string;
  declare subject: string;
  declare bodyText: string;
  declare bodyHtml: string;
  declare state: "waiting" | "sent" | "failed";
  declare tries: CreationOptional<number>;
  declare error: CreationOptional<string | null>;
  declare createdAt: Date;
  declare sentAt: CreationOptional<Date | null>;
}

Notification.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    alarmId: { type: DataTypes.BIGINT },
    operatorTaskId: { type: DataTypes.BIGINT },
    campaignId: { type: DataTypes.BIGINT },
    personId: { type: DataTypes.BIGINT, allowNull: false },
    kind: { type: DataTypes.TEXT, allowNull: false },
    address: { type: DataTypes.TEXT, allowNull: false },
    subject: { type: DataTypes.TEXT, allowNull: false },
    bodyText: { type: DataTypes.TEXT, allowNull: false },
    bodyHtml: { type: DataTypes.TEXT, allowNull: false },
    state: { type: DataTypes.TEXT, allowNull: false },
    tries: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    error: { type: DataTypes.TEXT },
    createdAt: { type: DataTypes.DATE, allowNull: false },
    sentAt: { type: DataTypes.DATE },
  },
  { sequelize, modelName: "Notification", tableName: "notification" },
);
