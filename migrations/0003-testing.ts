import {
  createTable,
  hash,
  id,
  json,
  optional,
  real,
  reference,
  type Step,
  text,
  time,
  whole,
} from './columns';

const latestAnalysis = 'shots_latest_analysis';

export async function up({ context: q }: Step): Promise<void> {
  await createTable(
    q,
    'runs',
    {
      id,
      shopId: reference('shops'),
      unitId: reference('units'),
      title: text(80),
      phase: text(10),
      startedById: reference('users'),
      startedAt: time,
    },
    [{ fields: ['unitId', 'startedAt'] }],
  );
  await createTable(
    q,
    'originals',
    {
      id,
      shopId: reference('shops'),
      sha256: hash,
      bytes: whole,
      mediaType: text(40),
      key: text(200),
      addedById: reference('users'),
      createdAt: time,
    },
    [{ fields: ['shopId', 'sha256'], unique: true }],
  );
  await createTable(
    q,
    'shots',
    {
      id,
      shopId: reference('shops'),
      runId: reference('runs'),
      originalId: reference('originals'),
      name: text(255),
      state: { ...text(20), defaultValue: 'queued' },
      requestedKind: { ...text(20), defaultValue: 'auto' },
      kind: optional(text(20)),
      progress: { ...real, defaultValue: 0 },
      takenAt: optional(text(30)),
      error: optional(text(1000)),
      warnings: { ...whole, defaultValue: 0 },
      latestAnalysisId: { ...optional(text(26)), type: id.type },
      addedById: reference('users'),
      addedAt: time,
      changedAt: time,
    },
    [{ fields: ['runId', 'originalId'], unique: true }, { fields: ['runId', 'changedAt'] }],
  );
  await createTable(
    q,
    'analyses',
    {
      id,
      shopId: reference('shops'),
      shotId: reference('shots'),
      version: text(20),
      kind: text(20),
      width: whole,
      height: whole,
      capture: json,
      registration: optional(json),
      metrics: json,
      warnings: json,
      milliseconds: json,
      plots: json,
      pictures: json,
      at: time,
    },
    [{ fields: ['shotId', 'at'] }],
  );
  await q.addConstraint('shots', {
    name: latestAnalysis,
    type: 'foreign key',
    fields: ['latestAnalysisId'],
    references: { table: 'analyses', field: 'id' },
    onDelete: 'RESTRICT',
    onUpdate: 'RESTRICT',
  });
  await createTable(
    q,
    'measurements',
    {
      id,
      shopId: reference('shops'),
      analysisId: reference('analyses'),
      modelId: reference('camera_models'),
      unitId: reference('units'),
      name: text(40),
      zone: { ...text(20), defaultValue: '' },
      edge: { ...text(12), defaultValue: '' },
      value: real,
      unit: text(12),
      uncertainty: real,
    },
    [
      { fields: ['analysisId', 'name', 'zone', 'edge'], unique: true },
      { fields: ['shopId', 'modelId', 'name'] },
    ],
  );
}

export async function down({ context: q }: Step): Promise<void> {
  await q.dropTable('measurements');
  await q.removeConstraint('shots', latestAnalysis);
  for (const table of ['analyses', 'shots', 'originals', 'runs']) {
    await q.dropTable(table);
  }
}
