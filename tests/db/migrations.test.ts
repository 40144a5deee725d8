import { type DataType, type Model, type ModelStatic, QueryTypes } from 'sequelize';
import { afterAll, beforeAll, expect, inject, test } from 'vitest';
import { connect } from '@/models/db';
import { migrator } from '@/scripts/lib/migrate';

// A database of its own beside the one that the other tests use.
const url = inject('databaseUrl');
const db = connect(`${url}_migrations`);
beforeAll(async () => {
  const { sequelize } = connect(url);
  await sequelize.getQueryInterface().createDatabase('mendlight_migrations');
  await sequelize.close();
});
afterAll(async () => {
  await db.sequelize.close();
});

interface Column {
  table: string;
  name: string;
  type: string;
  nullable: string;
}

const select = <T extends object>(sql: string) =>
  db.sequelize.query<T>(sql, { type: QueryTypes.SELECT });
const columns = () =>
  select<Column>(
    `SELECT TABLE_NAME AS \`table\`, COLUMN_NAME AS name, COLUMN_TYPE AS type, IS_NULLABLE AS nullable
     FROM information_schema.COLUMNS WHERE TABLE_SCHEMA = DATABASE() AND TABLE_NAME <> 'schema_migrations'`,
  );

// What MariaDB calls the types that Sequelize writes (JSON is LONGTEXT with a check, MariaDB's manual, "JSON Data Type").
const storedAs: Record<string, string> = {
  JSON: 'longtext',
  'TINYINT(1)': 'tinyint(1)',
  INTEGER: 'int(11)',
  'DOUBLE PRECISION': 'double',
  DOUBLE: 'double',
  'DATETIME(3)': 'datetime(3)',
};

const nameOf = (type: DataType) =>
  typeof type === 'string' ? type : 'toSql' in type ? type.toSql() : String(type);

function expected(): Map<string, { type: string; nullable: boolean }> {
  const wanted = new Map<string, { type: string; nullable: boolean }>();
  const { sequelize: _, ...models } = db;
  for (const model of Object.values(models) as ModelStatic<Model>[]) {
    for (const [name, attribute] of Object.entries(model.getAttributes())) {
      const type = nameOf(attribute.type);
      wanted.set(`${model.getTableName()}.${name}`, {
        type: storedAs[type] ?? type.toLowerCase(),
        nullable: attribute.allowNull ?? true,
      });
    }
  }
  return wanted;
}

test('all migrations go up, down to nothing, and up again to the same schema', async () => {
  const steps = migrator(db.sequelize);
  expect((await steps.up()).length).toBeGreaterThanOrEqual(5);
  const first = await columns();
  await steps.down({ to: 0 });
  expect(await columns()).toEqual([]);
  await steps.up();
  expect(await columns()).toEqual(first);
});

test('every table has exactly the columns, types and nullability of its model', async () => {
  const found = new Map(
    (await columns()).map(({ table, name, type, nullable }) => [
      `${table}.${name}`,
      { type, nullable: nullable === 'YES' },
    ]),
  );
  const byName = (a: [string, unknown], b: [string, unknown]) => a[0].localeCompare(b[0]);
  expect([...found].sort(byName)).toEqual([...expected()].sort(byName));
});

test('every table is InnoDB in utf8mb4, and every …Id column of a table but jobs’ and the audit’s subject is a foreign key', async () => {
  const tables = await select<{ engine: string; collation: string }>(
    `SELECT ENGINE AS engine, TABLE_COLLATION AS collation FROM information_schema.TABLES
     WHERE TABLE_SCHEMA = DATABASE() AND TABLE_NAME <> 'schema_migrations'`,
  );
  for (const table of tables) {
    expect(table).toEqual({ engine: 'InnoDB', collation: 'utf8mb4_unicode_ci' });
  }
  const keys = await select<{ name: string }>(
    `SELECT CONCAT(TABLE_NAME, '.', COLUMN_NAME) AS name FROM information_schema.KEY_COLUMN_USAGE
     WHERE TABLE_SCHEMA = DATABASE() AND REFERENCED_TABLE_NAME IS NOT NULL`,
  );
  const plain = new Set(['jobs.subjectId', 'audit_events.subjectId', 'rule_results.ruleId']);
  const wanted = (await columns())
    .filter(({ name }) => /Id$/.test(name))
    .map(({ table, name }) => `${table}.${name}`)
    .filter((name) => !plain.has(name));
  expect(keys.map(({ name }) => name).sort()).toEqual(wanted.sort());
});

test('a second shop may use the same tag and e-mail addresses are unique whatever their case', async () => {
  const { Shop, User, CameraModel, Unit } = db;
  const person = { email: 'Ada@example.org', name: 'Ada', passwordHash: 'x' };
  const user = await User.create(person);
  await expect(User.create({ ...person, email: 'ada@example.org' })).rejects.toThrow('Validation');
  const take = async (shopId: string) => {
    const model = await CameraModel.create({
      shopId,
      maker: 'Orrery',
      name: 'P1',
      modelClass: 'small-sensor-compact',
    });
    const unit = { shopId, modelId: model.id, tag: 'ML-0001', serial: '1', fault: 'dark' };
    const more = { state: 'received' as const, accessories: ['strap'], receivedById: user.id };
    const made = await Unit.create({ ...unit, ...more });
    await expect(Unit.create({ ...unit, ...more })).rejects.toThrow('Validation');
    return made;
  };
  for (const name of ['one', 'two']) {
    const shop = await Shop.create({ name });
    const unit = await take(shop.id);
    expect((await Unit.findByPk(unit.id))?.accessories).toEqual(['strap']);
  }
});
