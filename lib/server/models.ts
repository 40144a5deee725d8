import 'server-only';
import type { Transaction } from 'sequelize';
import type { Actor } from '@/lib/shared/api';
import { UserError } from '@/lib/shared/errors';
import { type ModelClass, modelClassWords } from '@/lib/shared/words';
import type { CameraModel } from '@/models/bench';
import { inShop } from './access';
import { db } from './db';

interface Named {
  maker: string;
  model: string;
  modelClass: ModelClass;
}

/** The shop's camera model of this maker and name, added when new. */
export async function findOrCreateModel(
  actor: Actor,
  { maker, model, modelClass }: Named,
  transaction: Transaction,
): Promise<CameraModel> {
  const where = inShop(actor, { maker, name: model });
  const known = await db().CameraModel.findOne({ where, transaction });
  if (!known) return db().CameraModel.create({ ...where, modelClass }, { transaction });
  if (known.modelClass !== modelClass) {
    const words = modelClassWords[known.modelClass];
    throw new UserError('invalid', `${maker} ${model} is listed here as a ${words}.`, {
      modelClass: `This model is listed as a ${words}.`,
    });
  }
  return known;
}

/** The shop's models, for a form's suggestions. */
export async function listModels(actor: Actor): Promise<Named[]> {
  const models = await db().CameraModel.findAll({
    where: inShop(actor),
    order: ['maker', 'name'],
  });
  return models.map(({ maker, name, modelClass }) => ({ maker, model: name, modelClass }));
}
