import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";
import type { DateRange } from "@/models/json";

export class Mount extends Model<InferAttributes<Mount>, InferCreationAttributes<Mount>> {
  declare id: CreationOptional<string>;
  declare sensorId: string;
  declare rigId: string;
  declare position: CreationOptional<number>;
  declare period: DateRange;
  declare mountedBy: CreationOptional<string | null>;
  declare endedBy: CreationOptional<string | null>;
  declare note: CreationOptional<string | null>;
  declare createdAt: Date;
}

Mount.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    sensorId: { type: DataTypes.BIGINT, allowNull: false },
    rigId: { type: DataTypes.BIGINT, allowNull: false },
    position: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 1 },
    period: { type: DataTypes.RANGE(DataTypes.DATE), allowNull: false },
    mountedBy: { type: DataTypes.BIGINT },
    endedBy: { type: DataTypes.BIGINT },
    note: { type: DataTypes.TEXT },
    createdAt: { type: DataTypes.DATE, allowNull: false },
  },
  { sequelize, modelName: "Mount", tableName: "mount" },
);
