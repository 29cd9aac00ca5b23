import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class OperatorTask extends Model<InferAttributes<OperatorTask>, InferCreationAttributes<OperatorTask>> {
  declare id: CreationOptional<string>;
  declare rigId: string;
  declare campaignId: CreationOptional<string | null>;
  declare stepId: CreationOptional<string | null>;
  declare holdId: CreationOptional<string | null>;
  declare kind: "ask" | "mount" | "load" | "waste" | "look" | "lot" | "other";
  declare instruction: string;
  declare urgency: CreationOptional<"low" | "normal" | "high">;
  declare port: CreationOptional<number | null>;
  declare state: "open" | "answered" | "withdrawn";
  declare createdAt: Date;
  declare dueAt: CreationOptional<Date | null>;
  declare answer: CreationOptional<"done" | "cannot" | null>;
  declare note: CreationOptional<string | null>;
  declare answeredBy: CreationOptional<string | null>;
  declare answeredAt: CreationOptional<Date | null>;
}

OperatorTask.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    rigId: { type: DataTypes.BIGINT, allowNull: false },
    campaignId: { type: DataTypes.BIGINT },
    stepId: { type: DataTypes.BIGINT },
    holdId: { type: DataTypes.BIGINT },
    kind: { type: DataTypes.TEXT, allowNull: false },
    instruction: { type: DataTypes.TEXT, allowNull: false },
    urgency: { type: DataTypes.TEXT, allowNull: false, defaultValue: "normal" },
    port: { type: DataTypes.INTEGER },
    state: { type: DataTypes.TEXT, allowNull: false },
    createdAt: { type: DataTypes.DATE, allowNull: false },
    dueAt: { type: DataTypes.DATE },
    answer: { type: DataTypes.TEXT },
    note: { type: DataTypes.TEXT },
    answeredBy: { type: DataTypes.BIGINT },
    answeredAt: { type: DataTypes.DATE },
  },
  { sequelize, modelName: "OperatorTask", tableName: "operator_task" },
);
