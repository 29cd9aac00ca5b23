import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class IdempotencyKey extends Model<InferAttributes<IdempotencyKey>, InferCreationAttributes<IdempotencyKey>> {
  declare personId: string;
  declare key: string;
  declare call: string;
  declare bodyHash: Buffer;
  declare status: CreationOptional<number | null>;
  declare answer: CreationOptional<unknown>;
  declare createdAt: Date;
}

IdempotencyKey.init(
  {
    personId: { type: DataTypes.BIGINT, primaryKey: true },
    key: { type: DataTypes.TEXT, primaryKey: true },
    call: { type: DataTypes.TEXT, allowNull: false },
    bodyHash: { type: DataTypes.BLOB, allowNull: false },
    status: { type: DataTypes.INTEGER },
    answer: { type: DataTypes.JSONB },
    createdAt: { type: DataTypes.DATE, allowNull: false },
  },
  { sequelize, modelName: "IdempotencyKey", tableName: "idempotency_key" },
);
