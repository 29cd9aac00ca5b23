import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";
import type { CertificateRow } from "@/models/json";

export class Lot extends Model<InferAttributes<Lot>, InferCreationAttributes<Lot>> {
  declare id: CreationOptional<string>;
  declare liquidId: string;
  declare code: string;
  declare receivedAt: CreationOptional<Date | null>;
  declare expiresAt: CreationOptional<Date | null>;
  declare certificate: CreationOptional<CertificateRow[]>;
  declare createdAt: Date;
}

Lot.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    liquidId: { type: DataTypes.BIGINT, allowNull: false },
    code: { type: DataTypes.TEXT, allowNull: false },
    receivedAt: { type: DataTypes.DATE },
    expiresAt: { type: DataTypes.DATE },
    certificate: { type: DataTypes.JSONB, allowNull: false, defaultValue: [] },
    createdAt: { type: DataTypes.DATE, allowNull: false },
  },
  { sequelize, modelName: "Lot", tableName: "lot" },
);
