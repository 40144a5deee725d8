import {
  createTable,
  hash,
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
    'jobs',
    {
      id,
      kind: text(40),
      subjectId: { type: id.type, allowNull: false },
      state: { ...text(10), defaultValue: 'pending' },
      attempts: { ...whole, defaultValue: 0 },
      runAfter: time,
      leasedBy: optional(text(80)),
      leaseUntil: optional(time),
      error: optional(longText),
      pendingKey: optional(text(80)),
      createdAt: time,
      settledAt: optional(time),
    },
    [
      { fields: ['pendingKey'], unique: true },
      { fields: ['kind', 'state', 'runAfter'] },
      { fields: ['kind', 'state', 'leaseUntil'] },
    ],
  );
  await createTable(
    q,
    'mail_log',
    {
      id,
      shopId: optional(reference('shops')),
      idempotencyKey: text(160),
      recipient: text(254),
      subject: text(200),
      text: optional(longText),
      createdAt: time,
      sentAt: optional(time),
    },
    [{ fields: ['idempotencyKey'], unique: true }],
  );
  await createTable(
    q,
    'audit_events',
    {
      id,
      shopId: reference('shops'),
      position: whole,
      actorId: optional(reference('users')),
      action: text(60),
      subjectKind: text(40),
      subjectId: text(64),
      detail: json,
      at: time,
      previousHash: hash,
      hash,
    },
    [{ fields: ['shopId', 'position'], unique: true }],
  );
}

export async function down({ context: q }: Step): Promise<void> {
  for (const table of ['audit_events', 'mail_log', 'jobs']) {
    await q.dropTable(table);
  }
}
