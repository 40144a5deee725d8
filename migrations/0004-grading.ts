import {
  createTable,
  flag,
  hash,
  hugeText,
  id,
  json,
  longText,
  optional,
  real,
  reference,
  type Step,
  text,
  time,
  whole,
} from './columns';

export async function up({ context: q }: Step): Promise<void> {
  await createTable(
    q,
    'schemes',
    {
      id,
      shopId: reference('shops'),
      modelClass: text(40),
      version: whole,
      name: text(120),
      rules: json,
      createdAt: time,
    },
    [{ fields: ['shopId', 'modelClass', 'version'], unique: true }],
  );
  await createTable(
    q,
    'grades',
    {
      id,
      shopId: reference('shops'),
      unitId: reference('units'),
      runId: reference('runs'),
      schemeId: reference('schemes'),
      letter: text(10),
      proposed: text(10),
      reason: optional(longText),
      signedById: reference('users'),
      signedAt: time,
      ownWork: flag(false),
      analysisIds: json,
      standingUnitId: optional(reference('units')),
      supersededAt: optional(time),
    },
    [{ fields: ['standingUnitId'], unique: true }, { fields: ['unitId', 'signedAt'] }],
  );
  await createTable(
    q,
    'rule_results',
    {
      id,
      shopId: reference('shops'),
      gradeId: reference('grades'),
      position: whole,
      ruleId: text(60),
      value: optional(real),
      standing: text(20),
      allows: text(10),
      outcome: json,
    },
    [{ fields: ['gradeId', 'position'], unique: true }],
  );
  await createTable(
    q,
    'reports',
    {
      id,
      shopId: reference('shops'),
      unitId: reference('units'),
      slug: text(40),
      withdrawnAt: optional(time),
      withdrawReason: optional(text(500)),
      withdrawnById: optional(reference('users')),
      createdAt: time,
    },
    [
      { fields: ['slug'], unique: true },
      { fields: ['unitId'], unique: true },
    ],
  );
  await createTable(
    q,
    'report_versions',
    {
      id,
      shopId: reference('shops'),
      reportId: reference('reports'),
      gradeId: reference('grades'),
      version: whole,
      content: hugeText,
      sha256: hash,
      pictures: json,
      publishedById: reference('users'),
      publishedAt: time,
    },
    [{ fields: ['reportId', 'version'], unique: true }],
  );
}

export async function down({ context: q }: Step): Promise<void> {
  for (const table of ['report_versions', 'reports', 'rule_results', 'grades', 'schemes']) {
    await q.dropTable(table);
  }
}
