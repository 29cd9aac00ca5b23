import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class StepLease extends Model<InferAttributes<StepLease>, InferCreationAttributes<StepLease>> {
  declare lease: string;
  declare ordinal: CreationOptional<string>;
  declare stepId: string;
  declare rigId: string;
  declare agentSessionId: CreationOptional<string | null>;
  declare givenAt: Date;
}

StepLease.init(
  {
    lease: { type: DataTypes.TEXT, primaryKey: true },
    ordinal: { type: DataTypes.BIGINT },
    stepId: { type: DataTypes.BIGINT, allowNull: false },
    rigId: { type: DataTypes.BIGINT, allowNull: false },
    agentSessionId: { type: DataTypes.BIGINT },
    givenAt: { type: DataTypes.DATE, allowNull: false },
  },
  { sequelize, modelName: "StepLease", tableName: "step_lease" },
);
