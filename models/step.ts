import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";
import type { Cursor, StepPlan } from "@/lib/protocol/types";
import type { StepFailure, StepProgress } from "@/models/json";

export class Step extends Model<InferAttributes<Step>, InferCreationAttributes<Step>> {
  declare id: CreationOptional<string>;
  declare campaignId: string;
  declare rigId: string;
  declare sequence: number;
  declare blockId: string;
  declare protocolVersionId: string;
  declare kind: "measure" | "fill" | "drain" | "rinse" | "dry" | "settle" | "wait" | "ask";
  declare role: CreationOptional<"reference" | "check" | "sample" | "find" | null>;
  declare medium: CreationOptional<string | null>;
  declare slot: CreationOptional<string | null>;
  declare setPointC: CreationOptional<number | null>;
  declare cycle: number;
  declare label: string;
  declare detour: CreationOptional<string | null>;
  declare params: StepPlan["params"];
  declare mountId: CreationOptional<string | null>;
  declare loadId: CreationOptional<string | null>;
  declare state: "ready" | "out" | "done" | "failed" | "skipped";
  declare cursor: Cursor;
  declare attempt: CreationOptional<number>;
  declare emptyAttempts: CreationOptional<number>;
  declare failedAttempts: CreationOptional<number>;
  declare stored: CreationOptional<number>;
  declare storedAtIssue: CreationOptional<number>;
  declare progressed: CreationOptional<boolean>;
  declare lease: CreationOptional<string | null>;
  declare leaseExpiresAt: CreationOptional<Date | null>;
  declare done: CreationOptional<StepProgress | null>;
  declare failure: CreationOptional<StepFailure | null>;
  declare dueAt: CreationOptional<Date | null>;
  declare createdAt: Date;
  declare givenAt: CreationOptional<Date | null>;
  declare closedAt: CreationOptional<Date | null>;
  declare startedClock: CreationOptional<Date | null>;
  declare endedClock: CreationOptional<Date | null>;
}

Step.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    campaignId: { type: DataTypes.BIGINT, allowNull: false },
    rigId: { type: DataTypes.BIGINT, allowNull: false },
    sequence: { type: DataTypes.INTEGER, allowNull: false },
    blockId: { type: DataTypes.TEXT, allowNull: false },
    protocolVersionId: { type: DataTypes.BIGINT, allowNull: false },
    kind: { type: DataTypes.TEXT, allowNull: false },
    role: { type: DataTypes.TEXT },
    medium: { type: DataTypes.TEXT },
    slot: { type: DataTypes.TEXT },
    setPointC: { type: DataTypes.DOUBLE },
    cycle: { type: DataTypes.INTEGER, allowNull: false },
    label: { type: DataTypes.TEXT, allowNull: false },
    detour: { type: DataTypes.TEXT },
    params: { type: DataTypes.JSONB, allowNull: false },
    mountId: { type: DataTypes.BIGINT },
    loadId: { type: DataTypes.BIGINT },
    state: { type: DataTypes.TEXT, allowNull: false },
    cursor: { type: DataTypes.JSONB, allowNull: false },
    attempt: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    emptyAttempts: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    failedAttempts: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    stored: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    storedAtIssue: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    progressed: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false },
    lease: { type: DataTypes.TEXT },
    leaseExpiresAt: { type: DataTypes.DATE },
    done: { type: DataTypes.JSONB },
    failure: { type: DataTypes.JSONB },
    dueAt: { type: DataTypes.DATE },
    createdAt: { type: DataTypes.DATE, allowNull: false },
    givenAt: { type: DataTypes.DATE },
    closedAt: { type: DataTypes.DATE },
    startedClock: { type: DataTypes.DATE },
    endedClock: { type: DataTypes.DATE },
  },
  { sequelize, modelName: "Step", tableName: "step" },
);
