import { type CreationOptional, DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { sequelize } from "@/lib/db";

export class Person extends Model<InferAttributes<Person>, InferCreationAttributes<Person>> {
  declare id: CreationOptional<string>;
  declare email: string;
  declare name: string;
  declare role: "administrator" | "researcher" | "operator" | "viewer";
  declare passwordHash: CreationOptional<string | null>;
  declare sessionVersion: CreationOptional<number>;
  declare notify: CreationOptional<Record<string, boolean>>;
  declare createdAt: Date;
  declare closedAt: CreationOptional<Date | null>;
  declare seenAt: CreationOptional<Date | null>;
}

Person.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
    email: { type: DataTypes.TEXT, allowNull: false },
    name: { type: DataTypes.TEXT, allowNull: false },
    role: { type: DataTypes.TEXT, allowNull: false },
    passwordHash: { type: DataTypes.TEXT },
    sessionVersion: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 1 },
    notify: { type: DataTypes.JSONB, allowNull: false, defaultValue: {} },
    createdAt: { type: DataTypes.DATE, allowNull: false },
    closedAt: { type: DataTypes.DATE },
    seenAt: { type: DataTypes.DATE },
  },
  { sequelize, modelName: "Person", tableName: "person" },
);
