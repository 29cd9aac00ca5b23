import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class PasswordReset extends Model<InferAttributes<PasswordReset>, InferCreationAttributes<PasswordReset>> {
  declare id: CreationOptional<string>;
  declare personId: string;
  declare tokenHash: Buffer;
  declare createdAt: Date;
  declare expiresAt: Date;
  declare usedAt: CreationOptional<Date | null>;
}

PasswordReset.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    personId: { type: DataTypes.BIGINT, allowNull: false },
    tokenHash: { type: DataTypes.BLOB, allowNull: false },
    createdAt: { type: DataTypes.DATE, allowNull: false },
    expiresAt: { type: DataTypes.DATE, allowNull: false },
    usedAt: { type: DataTypes.DATE },
  },
  { sequelize, modelName: "PasswordReset", tableName: "password_reset" },
);
