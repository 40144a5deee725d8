import 'server-only';
import type { Actor } from '@/lib/shared/api';
import { UserError } from '@/lib/shared/errors';
import { nextStates, type Role, type UnitState } from '@/lib/shared/words';

/** Who may do what: the one table. `words` completes "Your role can't …". */
const permissions = {
  'unit.read': { words: 'see units', roles: ['owner', 'refurbisher', 'grader'] },
  'unit.create': { words: 'take a unit in', roles: ['owner', 'refurbisher'] },
  'unit.edit': { words: 'change a unit', roles: ['owner', 'refurbisher'] },
  'unit.move': { words: 'move a unit on', roles: ['owner', 'refurbisher', 'grader'] },
  'log.add': { words: 'write in the bench log', roles: ['owner', 'refurbisher'] },
  'check.save': { words: 'record function checks', roles: ['owner', 'refurbisher'] },
  'run.create': { words: 'start a test run', roles: ['owner', 'refurbisher'] },
  'run.read': { words: 'see test runs', roles: ['owner', 'refurbisher', 'grader'] },
  'shot.add': { words: 'add photographs', roles: ['owner', 'refurbisher'] },
  'shot.analyse': { words: 'analyse again', roles: ['owner', 'refurbisher', 'grader'] },
  'grade.read': { words: 'see grades', roles: ['owner', 'refurbisher', 'grader'] },
  'grade.queue': { words: 'see what awaits grading', roles: ['owner', 'grader'] },
  'grade.sign': { words: 'sign grades', roles: ['owner', 'grader'] },
  'report.read': { words: 'see the list of reports', roles: ['owner', 'refurbisher', 'grader'] },
  'report.publish': { words: 'publish reports', roles: ['owner', 'grader'] },
  'report.withdraw': { words: 'withdraw reports', roles: ['owner', 'grader'] },
  'member.read': { words: 'see the members', roles: ['owner'] },
  'member.manage': { words: 'change members', roles: ['owner'] },
  'shop.edit': { words: 'change the shop’s settings', roles: ['owner'] },
} as const satisfies Record<string, { words: string; roles: readonly Role[] }>;

export type Permission = keyof typeof permissions;

export function may(actor: Pick<Actor, 'role'>, permission: Permission): boolean {
  return (permissions[permission].roles as readonly Role[]).includes(actor.role);
}

export function demand(actor: Pick<Actor, 'role'>, permission: Permission): void {
  if (may(actor, permission)) return;
  const { words, roles } = permissions[permission];
  throw new UserError(
    'forbidden',
    `As ${actor.role} you can’t ${words}. Ask someone who is ${roles.join(' or ')}.`,
  );
}

/** Where this person may move a unit from a state; a grader only sends it back to the bench or the test. */
export function movesOf(actor: Pick<Actor, 'role'>, from: UnitState): readonly UnitState[] {
  if (actor.role !== 'grader') return nextStates[from];
  return from === 'awaiting-grade' || from === 'graded' ? nextStates[from] : [];
}

/** Every query of a shop's rows passes its conditions through here, so that none can forget the shop. */
export function inShop<T extends object>(
  actor: Pick<Actor, 'shopId'>,
  where?: T,
): T & { shopId: string } {
  return { ...(where as T), shopId: actor.shopId };
}
