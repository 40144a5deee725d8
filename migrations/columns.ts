import { DataTypes, type ModelAttributeColumnOptions, type QueryInterface } from 'sequelize';

/** Columns as the migrations make them. Never change one that a migration uses: applied migrations are history. */
type Column = ModelAttributeColumnOptions;

export const id: Column = { type: DataTypes.CHAR(26), primaryKey: true, allowNull: false };
export const hash: Column = { type: DataTypes.CHAR(64), allowNull: false };
export const longText: Column = { type: DataTypes.TEXT, allowNull: false };
export const hugeText: Column = { type: DataTypes.TEXT('long'), allowNull: false };
export const whole: Column = { type: DataTypes.INTEGER, allowNull: false };
export const real: Column = { type: DataTypes.DOUBLE, allowNull: false };
export const json: Column = { type: DataTypes.JSON, allowNull: false };
export const time: Column = { type: DataTypes.DATE(3), allowNull: false };
export const text = (length: number): Column => ({
  type: DataTypes.STRING(length),
  allowNull: false,
});
export const flag = (defaultValue: boolean): Column => ({
  type: DataTypes.BOOLEAN,
  allowNull: false,
  defaultValue,
});
/** A foreign key. Facts are never deleted, so what is pointed at can't be either. */
export const reference = (table: string): Column => ({
  type: DataTypes.CHAR(26),
  allowNull: false,
  references: { model: table, key: 'id' },
  onDelete: 'RESTRICT',
  onUpdate: 'RESTRICT',
});
export const optional = (column: Column): Column => ({ ...column, allowNull: true });

export interface Index {
  fields: string[];
  unique?: boolean;
}

export async function createTable(
  queries: QueryInterface,
  table: string,
  columns: Record<string, Column>,
  indexes: Index[] = [],
): Promise<void> {
  await queries.createTable(table, columns, {
    charset: 'utf8mb4',
    collate: 'utf8mb4_unicode_ci',
    engine: 'InnoDB',
  });
  for (const { fields, unique = false } of indexes) {
    await queries.addIndex(table, fields, {
      name: `${table}_${fields.join('_')}`.slice(0, 64),
      unique,
    });
  }
}

/** What umzug hands to each step. */
export interface Step {
  context: QueryInterface;
}
