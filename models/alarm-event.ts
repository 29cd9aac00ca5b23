import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class AlarmEvent extends Model<InferAttributes<AlarmEvent>, InferCreationAttributes<AlarmEvent>> {
  declare id: CreationOptional<string>;
  declare alarmId: string;
  declare at: Date;
  declare kind: string;
  declare who: string;
  declare text: string;
}

AlarmEvent.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    alarmId: { type: DataTypes.BIGINT, allowNull: false },
    at: { type: DataTypes.DATE, allowNull: false },
    kind: { type: DataTypes.TEXT, allowNull: false },
    who: { type: DataTypes.TEXT, allowNull: false },
    text: { type: DataTypes.TEXT, allowNull: false },
  },
  { sequelize, modelName: "AlarmEvent", tableName: "alarm_event" },
);
