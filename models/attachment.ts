import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class Attachment extends Model<InferAttributes<Attachment>, InferCreationAttributes<Attachment>> {
  declare id: CreationOptional<string>;
  declare lotId: CreationOptional<string | null>;
  declare sensorId: CreationOptional<string | null>;
  declare name: string;
  declare mediaType: string;
  declare content: Buffer;
  declare sha256: Buffer;
  declare addedBy: string;
  declare addedAt: Date;
}

Attachment.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    lotId: { type: DataTypes.BIGINT },
    sensorId: { type: DataTypes.BIGINT },
    name: { type: DataTypes.TEXT, allowNull: false },
    mediaType: { type: DataTypes.TEXT, allowNull: false },
    content: { type: DataTypes.BLOB, allowNull: false },
    sha256: { type: DataTypes.BLOB, allowNull: false },
    addedBy: { type: DataTypes.BIGINT, allowNull: false },
    addedAt: { type: DataTypes.DATE, allowNull: false },
  },
  { sequelize, modelName: "Attachment", tableName: "attachment" },
);
