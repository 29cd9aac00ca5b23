import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class Fit extends Model<InferAttributes<Fit>, InferCreationAttributes<Fit>> {
  declare fitRunId: string;
  declare stepId: string;
  declare idx: number;
  declare f0Hz: CreationOptional<number | null>;
  declare q: CreationOptional<number | null>;
  declare f0StdHz: CreationOptional<number | null>;
  declare qStd: CreationOptional<number | null>;
  declare f0QCovariance: CreationOptional<number | null>;
  declare amplitudeV: CreationOptional<number | null>;
  declare noiseV: CreationOptional<number | null>;
  declare flags: number;
}

Fit.init(
  {
    fitRunId: { type: DataTypes.BIGINT, primaryKey: true },
    stepId: { type: DataTypes.BIGINT, primaryKey: true },
    idx: { type: DataTypes.INTEGER, primaryKey: true },
    f0Hz: { type: DataTypes.DOUBLE },
    q: { type: DataTypes.DOUBLE },
    f0StdHz: { type: DataTypes.DOUBLE },
    qStd: { type: DataTypes.DOUBLE },
    f0QCovariance: { type: DataTypes.DOUBLE },
    amplitudeV: { type: DataTypes.DOUBLE },
    noiseV: { type: DataTypes.DOUBLE },
    flags: { type: DataTypes.SMALLINT, allowNull: false },
  },
  { sequelize, modelName: "Fit", tableName: "fit" },
);
