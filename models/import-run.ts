import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";
import type { ImportProblem } from "@/models/json";

export class ImportRun extends Model<InferAttributes<ImportRun>, InferCreationAttributes<ImportRun>> {
  declare id: CreationOptional<string>;
  declare name: string;
  declare sensorId: CreationOptional<string | null>;
  declare fileName: string;
  declare sizeBytes: CreationOptional<string>;
  declare sha256: CreationOptional<Buffer | null>;
  declare mapping: object;
  declare format: object;
  declare state: "receiving" | "waiting" | "running" | "done" | "refused" | "cancelled";
  declare reservedCampaignId: CreationOptional<string | null>;
  declare campaignId: CreationOptional<string | null>;
  declare readBytes: CreationOptional<string>;
  declare rowsRead: CreationOptional<number>;
  declare rowsStored: CreationOptional<number>;
  declare phases: CreationOptional<number>;
  declare problem: CreationOptional<ImportProblem | null>;
  declare cancelWanted: CreationOptional<boolean>;
  declare createdBy: string;
  declare createdAt: Date;
  declare startedAt: CreationOptional<Date | null>;
  declare endedAt: CreationOptional<Date | null>;
}

ImportRun.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    name: { type: DataTypes.TEXT, allowNull: false },
    sensorId: { type: DataTypes.BIGINT },
    fileName: { type: DataTypes.TEXT, allowNull: false },
    sizeBytes: { type: DataTypes.BIGINT, allowNull: false, defaultValue: 0 },
    sha256: { type: DataTypes.BLOB },
    mapping: { type: DataTypes.JSONB, allowNull: false },
    format: { type: DataTypes.JSONB, allowNull: false },
    state: { type: DataTypes.TEXT, allowNull: false },
    reservedCampaignId: { type: DataTypes.BIGINT },
    campaignId: { type: DataTypes.BIGINT },
    readBytes: { type: DataTypes.BIGINT, allowNull: false, defaultValue: 0 },
    rowsRead: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    rowsStored: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    phases: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    problem: { type: DataTypes.JSONB },
    cancelWanted: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false },
    createdBy: { type: DataTypes.BIGINT, allowNull: false },
    createdAt: { type: DataTypes.DATE, allowNull: false },
    startedAt: { type: DataTypes.DATE },
    endedAt: { type: DataTypes.DATE },
  },
  { sequelize, modelName: "ImportRun", tableName: "import_run" },
);
