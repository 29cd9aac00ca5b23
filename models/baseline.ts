import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class Baseline extends Model<InferAttributes<Baseline>, InferCreationAttributes<Baseline>> {
  declare id: CreationOptional<string>;
  declare campaignId: string;
  declare mountId: string;
  declare setPointC: CreationOptional<number | null>;
  declare readout: string;
  declare fitRunId: string;
  declare f0Hz: number;
  declare q: number;
  declare n: number;
  declare completeAt: CreationOptional<Date | null>;
}

Baseline.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    campaignId: { type: DataTypes.BIGINT, allowNull: false },
    mountId: { type: DataTypes.BIGINT, allowNull: false },
    setPointC: { type: DataTypes.DOUBLE },
    readout: { type: DataTypes.TEXT, allowNull: false },
    fitRunId: { type: DataTypes.BIGINT, allowNull: false },
    f0Hz: { type: DataTypes.DOUBLE, allowNull: false },
    q: { type: DataTypes.DOUBLE, allowNull: false },
    n: { type: DataTypes.INTEGER, allowNull: false },
    completeAt: { type: DataTypes.DATE },
  },
  { sequelize, modelName: "Baseline", tableName: "baseline" },
);
