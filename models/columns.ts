import { DataTypes } from 'sequelize';
import { newId } from './id';

/** The few kinds of column the tables are made of; `migrations/columns.ts` has their frozen twins. */
export const id = () => ({
  type: DataTypes.CHAR(26),
  primaryKey: true,
  allowNull: false,
  defaultValue: () => newId(),
});
export const reference = () => ({ type: DataTypes.CHAR(26), allowNull: false });
export const optionalReference = () => ({ type: DataTypes.CHAR(26), allowNull: true });
export const text = (length: number) => ({ type: DataTypes.STRING(length), allowNull: false });
export const optionalText = (length: number) => ({
  type: DataTypes.STRING(length),
  allowNull: true,
});
export const longText = () => ({ type: DataTypes.TEXT, allowNull: false });
export const optionalLongText = () => ({ type: DataTypes.TEXT, allowNull: true });
export const hash = () => ({ type: DataTypes.CHAR(64), allowNull: false });
export const whole = () => ({ type: DataTypes.INTEGER, allowNull: false });
export const optionalWhole = () => ({ type: DataTypes.INTEGER, allowNull: true });
export const real = () => ({ type: DataTypes.DOUBLE, allowNull: false });
export const optionalReal = () => ({ type: DataTypes.DOUBLE, allowNull: true });
export const flag = (defaultValue: boolean) => ({
  type: DataTypes.BOOLEAN,
  allowNull: false,
  defaultValue,
});
export const json = () => ({ type: DataTypes.JSON, allowNull: false });
export const optionalJson = () => ({ type: DataTypes.JSON, allowNull: true });
/** UTC with milliseconds, set when the row is made. */
export const now = () => ({
  type: DataTypes.DATE(3),
  allowNull: false,
  defaultValue: DataTypes.NOW,
});
export const time = () => ({ type: DataTypes.DATE(3), allowNull: false });
export const optionalTime = () => ({ type: DataTypes.DATE(3), allowNull: true });
