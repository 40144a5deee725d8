import {
  createTable,
  id,
  json,
  longText,
  optional,
  reference,
  type Step,
  text,
  time,
  whole,
} from './columns';

export async function up({ context: q }: Step): Promise<void> {
  await createTable(
    q,
    'camera_models',
    {
      id,
      shopId: reference('shops'),
      maker: text(60),
      name: text(60),
      modelClass: text(40),
      createdAt: time,
    },
    [{ fields: ['shopId', 'maker', 'name'], unique: true }],
  );
  await createTable(
    q,
    'units',
    {
      id,
      shopId: reference('shops'),
      modelId: reference('camera_models'),
      tag: text(20),
      serial: text(60),
      state: text(20),
      fault: text(500),
      source: optional(text(120)),
      priceMinor: optional(whole),
      accessories: json,
      condition: optional(text(500)),
      receivedById: reference('users'),
      receivedAt: time,
      changedAt: time,
    },
    [
      { fields: ['shopId', 'tag'], unique: true },
      { fields: ['shopId', 'state', 'changedAt'] },
      { fields: ['shopId', 'changedAt'] },
      { fields: ['shopId', 'serial'] },
    ],
  );
  await createTable(
    q,
    'state_changes',
    {
      id,
      shopId: reference('shops'),
      unitId: reference('units'),
      fromState: optional(text(20)),
      toState: text(20),
      note: optional(text(500)),
      byId: reference('users'),
      at: time,
    },
    [{ fields: ['unitId', 'at'] }],
  );
  await createTable(
    q,
    'log_entries',
    {
      id,
      shopId: reference('shops'),
      unitId: reference('units'),
      kind: text(20),
      text: longText,
      minutes: optional(whole),
      costMinor: optional(whole),
      amendsId: optional(reference('log_entries')),
      byId: reference('users'),
      at: time,
    },
    [{ fields: ['unitId', 'at'] }],
  );
  await createTable(
    q,
    'function_checks',
    {
      id,
      shopId: reference('shops'),
      unitId: reference('units'),
      item: text(40),
      outcome: text(20),
      note: optional(text(300)),
      byId: reference('users'),
      at: time,
    },
    [{ fields: ['unitId', 'item', 'at'] }],
  );
}

export async function down({ context: q }: Step): Promise<void> {
  for (const table of [
    'function_checks',
    'log_entries',
    'state_changes',
    'units',
    'camera_models',
  ]) {
    await q.dropTable(table);
  }
}
