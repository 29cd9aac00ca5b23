import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class Invitation extends Model<InferAttributes<Invitation>, InferCreationAttributes<Invitation>> {
  declare id: CreationOptional<string>;
  declare email: string;
  declare name: string;
  declare role: "administrator" | "researcher" | "operator" | "viewer";
  declare tokenHash: Buffer;
  declare invitedBy: string;
  declare createdAt: Date;
  declare expiresAt: Date;
  declare acceptedAt: CreationOptional<Date | null>;
  declare withdrawnAt: CreationOptional<Date | null>;
  declare personId: CreationOptional<string | null>;
}

Invitation.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    email: { type: DataTypes.TEXT, allowNull: false },
    name: { type: DataTypes.TEXT, allowNull: false },
    role: { type: DataTypes.TEXT, allowNull: false },
    tokenHash: { type: DataTypes.BLOB, allowNull: false },
    invitedBy: { type: DataTypes.BIGINT, allowNull: false },
    createdAt: { type: DataTypes.DATE, allowNull: false },
    expiresAt: { type: DataTypes.DATE, allowNull: false },
    acceptedAt: { type: DataTypes.DATE },
    withdrawnAt: { type: DataTypes.DATE },
    personId: { type: DataTypes.BIGINT },
  },
  { sequelize, modelName: "Invitation", tableName: "invitation" },
);
