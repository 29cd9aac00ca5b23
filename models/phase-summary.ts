import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class PhaseSummary extends Model<InferAttributes<PhaseSummary>, InferCreationAttributes<PhaseSummary>> {
  declare phaseId: string;
  declare fitRunId: string;
  declare n: number;
  declare nUsed: number;
  declare unusable: number;
  declare f0Mean: CreationOptional<number | null>;
  declare f0Sd: CreationOptional<number | null>;
  declare f0U: CreationOptional<number | null>;
  declare f0R1: CreationOptional<number | null>;
  declare qMean: CreationOptional<number | null>;
  declare qSd: CreationOptional<number | null>;
  declare qU: CreationOptional<number | null>;
  declare qR1: CreationOptional<number | null>;
  declare temperatureMean: CreationOptional<number | null>;
  declare temperatureSd: CreationOptional<number | null>;
  declare pressureMean: CreationOptional<number | null>;
  declare flagCounts: CreationOptional<Record<string, number>>;
  declare columns: Buffer;
  declare madeAt: Date;
  declare digest: CreationOptional<Buffer | null>;
  declare earliestAt: CreationOptional<Date | null>;
  declare latestAt: CreationOptional<Date | null>;
  declare course: CreationOptional<(number | null)[] | null>;
}

PhaseSummary.init(
  {
    phaseId: { type: DataTypes.BIGINT, primaryKey: true },
    fitRunId: { type: DataTypes.BIGINT, primaryKey: true },
    n: { type: DataTypes.INTEGER, allowNull: false },
    nUsed: { type: DataTypes.INTEGER, allowNull: false },
    unusable: { type: DataTypes.INTEGER, allowNull: false },
    f0Mean: { type: DataTypes.DOUBLE },
    f0Sd: { type: DataTypes.DOUBLE },
    f0U: { type: DataTypes.DOUBLE },
    f0R1: { type: DataTypes.DOUBLE },
    qMean: { type: DataTypes.DOUBLE },
    qSd: { type: DataTypes.DOUBLE },
    qU: { type: DataTypes.DOUBLE },
    qR1: { type: DataTypes.DOUBLE },
    temperatureMean: { type: DataTypes.DOUBLE },
    temperatureSd: { type: DataTypes.DOUBLE },
    pressureMean: { type: DataTypes.DOUBLE },
    flagCounts: { type: DataTypes.JSONB, allowNull: false, defaultValue: {} },
    columns: { type: DataTypes.BLOB, allowNull: false },
    madeAt: { type: DataTypes.DATE, allowNull: false },
    digest: { type: DataTypes.BLOB },
    earliestAt: { type: DataTypes.DATE },
    latestAt: { type: DataTypes.DATE },
    course: { type: DataTypes.ARRAY(DataTypes.DOUBLE) },
  },
  { sequelize, modelName: "PhaseSummary", tableName: "phase_summary" },
);
