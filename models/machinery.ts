import {
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  Model,
  type Sequelize,
} from 'sequelize';
import {
  hash,
  id,
  json,
  now,
  optionalLongText,
  optionalReference,
  optionalText,
  optionalTime,
  reference,
  text,
  whole,
} from './columns';

export const jobStates = ['pending', 'running', 'done', 'failed'] as const;
export type JobState = (typeof jobStates)[number];

export class Job extends Model<InferAttributes<Job>, InferCreationAttributes<Job>> {
  declare id: CreationOptional<string>;
  declare kind: string;
  declare subjectId: string;
  declare state: CreationOptional<JobState>;
  declare attempts: CreationOptional<number>;
  declare runAfter: CreationOptional<Date>;
  /** Who works on it, and until when that is believed without a sign of life. */
  declare leasedBy: CreationOptional<string | null>;
  declare leaseUntil: CreationOptional<Date | null>;
  declare error: CreationOptional<string | null>;
  /** kind:subject until the job is claimed, then null: its unique index lets one such job wait at a time. */
  declare pendingKey: string | null;
  declare createdAt: CreationOptional<Date>;
  declare settledAt: CreationOptional<Date | null>;
}

/** Every mail that leaves. The text is kept until it is sent, as it may hold a link that works once. */
export class MailLog extends Model<InferAttributes<MailLog>, InferCreationAttributes<MailLog>> {
  declare id: CreationOptional<string>;
  declare shopId: CreationOptional<string | null>;
  declare idempotencyKey: string;
  declare recipient: string;
  declare subject: string;
  declare text: CreationOptional<string | null>;
  declare createdAt: CreationOptional<Date>;
  declare sentAt: CreationOptional<Date | null>;
}

/** Who did what. Append-only; each row carries the hash of the shop's row before it. */
export class AuditEvent extends Model<
  InferAttributes<AuditEvent>,
  InferCreationAttributes<AuditEvent>
> {
  declare id: CreationOptional<string>;
  declare shopId: string;
  /** 1, 2, 3 … in a shop. */
  declare position: number;
  declare actorId: CreationOptional<string | null>;
  declare action: string;
  declare subjectKind: string;
  declare subjectId: string;
  declare detail: Record<string, unknown>;
  declare at: CreationOptional<Date>;
  declare previousHash: string;
  declare hash: string;
}

export function defineMachinery(sequelize: Sequelize) {
  return {
    Job: class extends Job {}.init(
      {
        id: id(),
        kind: text(40),
        subjectId: reference(),
        state: { ...text(10), defaultValue: 'pending' },
        attempts: { ...whole(), defaultValue: 0 },
        runAfter: now(),
        leasedBy: optionalText(80),
        leaseUntil: optionalTime(),
        error: optionalLongText(),
        pendingKey: optionalText(80),
        createdAt: now(),
        settledAt: optionalTime(),
      },
      { sequelize, modelName: 'Job', tableName: 'jobs' },
    ),
    MailLog: class extends MailLog {}.init(
      {
        id: id(),
        shopId: optionalReference(),
        idempotencyKey: text(160),
        recipient: text(254),
        subject: text(200),
        text: optionalLongText(),
        createdAt: now(),
        sentAt: optionalTime(),
      },
      { sequelize, modelName: 'MailLog', tableName: 'mail_log' },
    ),
    AuditEvent: class extends AuditEvent {}.init(
      {
        id: id(),
        shopId: reference(),
        position: whole(),
        actorId: optionalReference(),
        action: text(60),
        subjectKind: text(40),
        subjectId: text(64),
        detail: json(),
        at: now(),
        previousHash: hash(),
        hash: hash(),
      },
      { sequelize, modelName: 'AuditEvent', tableName: 'audit_events' },
    ),
  };
}
