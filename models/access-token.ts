import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class AccessToken extends Model<InferAttributes<AccessToken>, InferCreationAttributes<AccessToken>> {
  declare id: CreationOptional<string>;
  declare personId: string;
  declare name: string;
  declare tokenHash: Buffer;
  declare last4: string;
  declare scope: "read" | "write";
  declare createdAt: Date;
  declare expiresAt: CreationOptional<Date | null>;
  declare revokedAt: CreationOptional<Date | null>;
  declare lastUsedAt: CreationOptional<Date | null>;
}

AccessToken.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    personId: { type: DataTypes.BIGINT, allowNull: false },
    name: { type: DataTypes.TEXT, allowNull: false },
    tokenHash: { type: DataTypes.BLOB, allowNull: false },
    last4: { type: DataTypes.TEXT, allowNull: false },
    scope: { type: DataTypes.TEXT, allowNull: false },
    createdAt: { type: DataTypes.DATE, allowNull: false },
    expiresAt: { type: DataTypes.DATE },
    revokedAt: { type: DataTypes.DATE },
    lastUsedAt: { type: DataTypes.DATE },
  },
  { sequelize, modelName: "AccessToken", tableName: "access_token" },
);
