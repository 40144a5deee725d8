/** The product's closed vocabularies, in the order in which people meet them. */
export const roles = ['owner', 'refurbisher', 'grader'] as const;
export type Role = (typeof roles)[number];

export const unitStates = [
  'received',
  'on-the-bench',
  'testing',
  'awaiting-grade',
  'graded',
  'published',
  'sold',
  'returned',
  'scrapped',
] as const;
export type UnitState = (typeof unitStates)[number];

export const unitStateWords: Record<UnitState, string> = {
  received: 'Received',
  'on-the-bench': 'On the bench',
  testing: 'Testing',
  'awaiting-grade': 'Awaiting grade',
  graded: 'Graded',
  published: 'Published',
  sold: 'Sold',
  returned: 'Returned',
  scrapped: 'Scrapped',
};

/** Which states a person may move a unit to from each state; graded and published are reached by signing and publishing only. */
export const nextStates: Record<UnitState, readonly UnitState[]> = {
  received: ['on-the-bench', 'scrapped'],
  'on-the-bench': ['testing', 'scrapped'],
  testing: ['on-the-bench', 'awaiting-grade', 'scrapped'],
  'awaiting-grade': ['testing', 'on-the-bench'],
  graded: ['testing', 'on-the-bench'],
  published: ['sold', 'on-the-bench'],
  sold: ['returned'],
  returned: ['on-the-bench', 'scrapped'],
  scrapped: [],
};

export const letters = ['A', 'B', 'C', 'Parts'] as const;
export type Letter = (typeof letters)[number];

export const shotStates = ['queued', 'analysing', 'done', 'failed'] as const;
export type ShotState = (typeof shotStates)[number];

export const checkOutcomes = ['pass', 'fail', 'not-fitted'] as const;
export type CheckOutcome = (typeof checkOutcomes)[number];

export const logKinds = ['symptom', 'check', 'finding', 'action', 'part', 'note'] as const;
export type LogKind = (typeof logKinds)[number];
export const logKindWords: Record<LogKind, string> = {
  symptom: 'Symptom',
  check: 'Check made',
  finding: 'What was seen',
  action: 'Action',
  part: 'Part fitted',
  note: 'Note',
};

export const modelClasses = [
  'small-sensor-compact',
  'large-sensor-compact',
  'interchangeable-lens',
] as const;
export type ModelClass = (typeof modelClasses)[number];
export const modelClassWords: Record<ModelClass, string> = {
  'small-sensor-compact': 'small-sensor compact',
  'large-sensor-compact': 'large-sensor compact',
  'interchangeable-lens': 'interchangeable-lens camera',
};

/** Where a value stands against one limit (JCGM 106): the full disc, the half disc and the open ring. */
export type Standing = 'within' | 'doubt' | 'outside';

/** Function checks of any camera; a class may leave some out ("not fitted"). */
export const functionCheckItems = [
  { id: 'display', label: 'Display' },
  { id: 'viewfinder', label: 'Viewfinder' },
  { id: 'buttons', label: 'Every button and wheel' },
  { id: 'menus', label: 'Every menu function' },
  { id: 'manual-focus', label: 'Manual focus' },
  { id: 'zoom', label: 'Zoom, end to end' },
  { id: 'autofocus-near', label: 'Autofocus, near' },
  { id: 'autofocus-far', label: 'Autofocus, far' },
  { id: 'exposure-modes', label: 'Each exposure mode' },
  { id: 'stabiliser', label: 'Stabiliser' },
  { id: 'flash', label: 'Flash' },
  { id: 'card-slot', label: 'Card slot' },
  { id: 'battery-door', label: 'Battery contacts and door' },
  { id: 'ports', label: 'Ports' },
  { id: 'video', label: 'Video with sound' },
] as const;
export type FunctionCheckId = (typeof functionCheckItems)[number]['id'];
