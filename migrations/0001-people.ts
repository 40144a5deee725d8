import {
  createTable,
  flag,
  hash,
  id,
  optional,
  reference,
  type Step,
  text,
  time,
  whole,
} from './columns';

export async function up({ context: q }: Step): Promise<void> {
  await createTable(q, 'shops', {
    id,
    name: text(80),
    currency: { ...text(3), defaultValue: 'EUR' },
    signOwnWork: flag(false),
    nextTag: { ...whole, defaultValue: 1 },
    createdAt: time,
  });
  await createTable(
    q,
    'users',
    { id, email: text(254), name: text(80), passwordHash: text(255), createdAt: time },
    [{ fields: ['email'], unique: true }],
  );
  await createTable(
    q,
    'memberships',
    {
      id,
      shopId: reference('shops'),
      userId: reference('users'),
      role: text(20),
      active: flag(true),
      createdAt: time,
    },
    [{ fields: ['shopId', 'userId'], unique: true }],
  );
  await createTable(
    q,
    'invitations',
    {
      id,
      shopId: reference('shops'),
      email: text(254),
      role: text(20),
      tokenHash: hash,
      invitedById: reference('users'),
      expiresAt: time,
      acceptedAt: optional(time),
      revokedAt: optional(time),
      createdAt: time,
    },
    [{ fields: ['tokenHash'], unique: true }],
  );
  await createTable(
    q,
    'sessions',
    {
      id,
      userId: reference('users'),
      shopId: reference('shops'),
      userAgent: text(400),
      startedAt: time,
      seenAt: time,
      expiresAt: time,
      endedAt: optional(time),
    },
    [{ fields: ['userId', 'endedAt'] }],
  );
  await createTable(
    q,
    'password_tokens',
    {
      id,
      userId: reference('users'),
      tokenHash: hash,
      expiresAt: time,
      usedAt: optional(time),
      createdAt: time,
    },
    [{ fields: ['tokenHash'], unique: true }],
  );
  await createTable(q, 'attempts', { id, bucket: text(300), at: time }, [
    { fields: ['bucket', 'at'] },
  ]);
}

export async function down({ context: q }: Step): Promise<void> {
  for (const table of [
    'attempts',
    'password_tokens',
    'sessions',
    'invitations',
    'memberships',
    'users',
    'shops',
  ]) {
    await q.dropTable(table);
  }
}
