import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class Reading extends Model<InferAttributes<Reading>, InferCreationAttributes<Reading>> {
  declare stepId: string;
  declare idx: number;
  declare takenAt: Date;
  declare at: Date;
  declare receivedAt: Date;
  declare durationS: CreationOptional<number | null>;
  declare temperatureC: CreationOptional<number | null>;
  declare pressurePa: CreationOptional<number | null>;
  declare humidityPercent: CreationOptional<number | null>;
  declare kind: number;
  declare flags: CreationOptional<number>;
  declare contentHash: Buffer;
}

Reading.init(
  {
    stepId: { type: DataTypes.BIGINT, primaryKey: true },
    idx: { type: DataTypes.INTEGER, primaryKey: true },
    takenAt: { type: DataTypes.DATE, allowNull: false },
    at: { type: DataTypes.DATE, allowNull: false },
    receivedAt: { type: DataTypes.DATE, allowNull: false },
    durationS: { type: DataTypes.DOUBLE },
    temperatureC: { type: DataTypes.DOUBLE },
    pressurePa: { type: DataTypes.DOUBLE },
    humidityPercent: { type: DataTypes.DOUBLE },
    kind: { type: DataTypes.SMALLINT, allowNull: false },
    flags: { type: DataTypes.SMALLINT, allowNull: false, defaultValue: 0 },
    contentHash: { type: DataTypes.BLOB, allowNull: false },
  },
  { sequelize, modelName: "Reading", tableName: "reading" },
);
