import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class Phase extends Model<InferAttributes<Phase>, InferCreationAttributes<Phase>> {
  declare id: CreationOptional<string>;
  declare campaignId: string;
  declare stepId: string;
  declare sequence: number;
  declare cycle: number;
  declare medium: string;
  declare role: "reference" | "check" | "sample";
  declare setPointC: CreationOptional<number | null>;
  declare mountId: CreationOptional<string | null>;
  declare loadId: CreationOptional<string | null>;
  declare liquidId: CreationOptional<string | null>;
  declare readout: "velocity" | "displacement";
  declare repeats: number;
  declare discard: CreationOptional<number>;
  declare startedAt: CreationOptional<Date | null>;
  declare endedAt: CreationOptional<Date | null>;
  declare closedAt: CreationOptional<Date | null>;
}

Phase.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    campaignId: { type: DataTypes.BIGINT, allowNull: false },
    stepId: { type: DataTypes.BIGINT, allowNull: false },
    sequence: { type: DataTypes.INTEGER, allowNull: false },
    cycle: { type: DataTypes.INTEGER, allowNull: false },
    medium: { type: DataTypes.TEXT, allowNull: false },
    role: { type: DataTypes.TEXT, allowNull: false },
    setPointC: { type: DataTypes.DOUBLE },
    mountId: { type: DataTypes.BIGINT },
    loadId: { type: DataTypes.BIGINT },
    liquidId: { type: DataTypes.BIGINT },
    readout: { type: DataTypes.TEXT, allowNull: false },
    repeats: { type: DataTypes.INTEGER, allowNull: false },
    discard: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    startedAt: { type: DataTypes.DATE },
    endedAt: { type: DataTypes.DATE },
    closedAt: { type: DataTypes.DATE },
  },
  { sequelize, modelName: "Phase", tableName: "phase" },
);
