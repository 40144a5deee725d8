import 'server-only';
import type { Transaction } from 'sequelize';
import type { Actor } from '@/lib/shared/api';
import type { Scheme } from '@/lib/shared/grading/scheme';
import { defaultSchemes } from '@/lib/shared/grading/schemes';
import type { ModelClass } from '@/lib/shared/words';
import type { Scheme as SchemeRow } from '@/models/grading';
import { inShop } from './access';
import { db } from './db';

/** The scheme by which a shop grades a class of camera: its newest version, or the one that ships. */
export async function schemeOf(actor: Actor, modelClass: ModelClass): Promise<Scheme> {
  const row = await newest(actor, modelClass);
  return row ? (row.rules as Scheme) : defaultSchemes[modelClass];
}

/** The same as a row, kept on first use, so that a signed grade can point at it for good. */
export async function schemeRow(
  actor: Actor,
  modelClass: ModelClass,
  transaction: Transaction,
): Promise<SchemeRow> {
  const known = await newest(actor, modelClass, transaction);
  if (known) return known;
  const rules = defaultSchemes[modelClass];
  return db().Scheme.create(
    inShop(actor, { modelClass, version: rules.version, name: rules.name, rules }),
    { transaction },
  );
}

const newest = (actor: Actor, modelClass: ModelClass, transaction?: Transaction) =>
  db().Scheme.findOne({
    where: inShop(actor, { modelClass }),
    order: [['version', 'DESC']],
    ...(transaction && { transaction }),
  });
