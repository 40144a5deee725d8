import {
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  Model,
  type NonAttribute,
  type Sequelize,
} from 'sequelize';
import type { Role } from '@/lib/shared/words';
import { flag, hash, id, now, optionalTime, reference, text, time, whole } from './columns';

export class Shop extends Model<InferAttributes<Shop>, InferCreationAttributes<Shop>> {
  declare id: CreationOptional<string>;
  declare name: string;
  /** ISO 4217. */
  declare currency: CreationOptional<string>;
  /** A shop of one may let people sign units whose bench work is their own. */
  declare signOwnWork: CreationOptional<boolean>;
  /** Number of the next unit's tag; raised under a row lock. */
  declare nextTag: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
}

export class User extends Model<InferAttributes<User>, InferCreationAttributes<User>> {
  declare id: CreationOptional<string>;
  declare email: string;
  declare name: string;
  declare passwordHash: string;
  declare createdAt: CreationOptional<Date>;
}

export class Membership extends Model<
  InferAttributes<Membership>,
  InferCreationAttributes<Membership>
> {
  declare id: CreationOptional<string>;
  declare shopId: string;
  declare userId: string;
  declare role: Role;
  declare active: CreationOptional<boolean>;
  declare createdAt: CreationOptional<Date>;
  declare user?: NonAttribute<User>;
  declare shop?: NonAttribute<Shop>;
}

export class Invitation extends Model<
  InferAttributes<Invitation>,
  InferCreationAttributes<Invitation>
> {
  declare id: CreationOptional<string>;
  declare shopId: string;
  declare email: string;
  declare role: Role;
  /** SHA-256 of the token that the mail carries. */
  declare tokenHash: string;
  declare invitedById: string;
  declare expiresAt: Date;
  declare acceptedAt: CreationOptional<Date | null>;
  declare revokedAt: CreationOptional<Date | null>;
  declare createdAt: CreationOptional<Date>;
  declare shop?: NonAttribute<Shop>;
}

export class Session extends Model<InferAttributes<Session>, InferCreationAttributes<Session>> {
  declare id: CreationOptional<string>;
  declare userId: string;
  declare shopId: string;
  declare userAgent: string;
  declare startedAt: CreationOptional<Date>;
  declare seenAt: CreationOptional<Date>;
  declare expiresAt: Date;
  declare endedAt: CreationOptional<Date | null>;
  declare user?: NonAttribute<User>;
  declare shop?: NonAttribute<Shop>;
}

export class PasswordToken extends Model<
  InferAttributes<PasswordToken>,
  InferCreationAttributes<PasswordToken>
> {
  declare id: CreationOptional<string>;
  declare userId: string;
  declare tokenHash: string;
  declare expiresAt: Date;
  declare usedAt: CreationOptional<Date | null>;
  declare createdAt: CreationOptional<Date>;
  declare user?: NonAttribute<User>;
}

/** One row a try at something that is limited (sign-in, password mails), so that every web process counts alike. */
export class Attempt extends Model<InferAttributes<Attempt>, InferCreationAttributes<Attempt>> {
  declare id: CreationOptional<string>;
  /** What is counted: `sign-in:ada@example.org`. */
  declare bucket: string;
  declare at: CreationOptional<Date>;
}

export function definePeople(sequelize: Sequelize) {
  return {
    Shop: class extends Shop {}.init(
      {
        id: id(),
        name: text(80),
        currency: { ...text(3), defaultValue: 'EUR' },
        signOwnWork: flag(false),
        nextTag: { ...whole(), defaultValue: 1 },
        createdAt: now(),
      },
      { sequelize, modelName: 'Shop', tableName: 'shops' },
    ),
    User: class extends User {}.init(
      { id: id(), email: text(254), name: text(80), passwordHash: text(255), createdAt: now() },
      { sequelize, modelName: 'User', tableName: 'users' },
    ),
    Membership: class extends Membership {}.init(
      {
        id: id(),
        shopId: reference(),
        userId: reference(),
        role: text(20),
        active: flag(true),
        createdAt: now(),
      },
      { sequelize, modelName: 'Membership', tableName: 'memberships' },
    ),
    Invitation: class extends Invitation {}.init(
      {
        id: id(),
        shopId: reference(),
        email: text(254),
        role: text(20),
        tokenHash: hash(),
        invitedById: reference(),
        expiresAt: time(),
        acceptedAt: optionalTime(),
        revokedAt: optionalTime(),
        createdAt: now(),
      },
      { sequelize, modelName: 'Invitation', tableName: 'invitations' },
    ),
    Session: class extends Session {}.init(
      {
        id: id(),
        userId: reference(),
        shopId: reference(),
        userAgent: text(400),
        startedAt: now(),
        seenAt: now(),
        expiresAt: time(),
        endedAt: optionalTime(),
      },
      { sequelize, modelName: 'Session', tableName: 'sessions' },
    ),
    PasswordToken: class extends PasswordToken {}.init(
      {
        id: id(),
        userId: reference(),
        tokenHash: hash(),
        expiresAt: time(),
        usedAt: optionalTime(),
        createdAt: now(),
      },
      { sequelize, modelName: 'PasswordToken', tableName: 'password_tokens' },
    ),
    Attempt: class extends Attempt {}.init(
      { id: id(), bucket: text(300), at: now() },
      { sequelize, modelName: 'Attempt', tableName: 'attempts' },
    ),
  };
}
