import { z } from 'zod';
import {
  checkOutcomes,
  functionCheckItems,
  letters,
  logKinds,
  modelClasses,
  roles,
  unitStates,
} from './words';

/** One schema an input, used by form, handler and type; messages are what the person reads. */
const line = (what: string, max = 120) =>
  z.string().trim().min(1, `Enter ${what}.`).max(max, `Keep ${what} under ${max} characters.`);
const optionalLine = (max = 500) =>
  z.string().trim().max(max, `Keep it under ${max} characters.`).optional();

export const emailSchema = z
  .email('Enter an e-mail address such as name@example.org.')
  .trim()
  .toLowerCase()
  .max(254);
export const passwordSchema = z
  .string()
  .min(10, 'Use at least 10 characters.')
  .max(200, 'Use at most 200 characters.');

export const signInSchema = z.strictObject({
  email: emailSchema,
  password: z.string().min(1, 'Enter your password.'),
});
export const forgottenSchema = z.strictObject({ email: emailSchema });
export const newPasswordSchema = z.strictObject({ password: passwordSchema });
export const acceptInvitationSchema = z.strictObject({
  name: line('your name', 80),
  password: passwordSchema,
});
export const inviteSchema = z.strictObject({ email: emailSchema, role: z.enum(roles) });
export const changeMemberSchema = z.strictObject({
  role: z.enum(roles).optional(),
  active: z.boolean().optional(),
});
export const shopSettingsSchema = z.strictObject({
  name: line('the shop’s name', 80).optional(),
  signOwnWork: z.boolean().optional(),
});

/** Money is integer minor units of the shop's currency. */
export const minorUnits = z
  .int('Enter an amount.')
  .min(0, 'Enter an amount of zero or more.')
  .max(100_000_000);

const accessories = z.array(z.string().trim().min(1).max(60)).max(30);
export const unitInputSchema = z.strictObject({
  maker: line('the maker', 60),
  model: line('the model', 60),
  modelClass: z.enum(modelClasses),
  serial: line('the serial number', 60),
  source: optionalLine(120),
  priceMinor: minorUnits.optional(),
  fault: line('the stated fault', 500),
  accessories: accessories.default([]),
  condition: optionalLine(500),
});
export type UnitInput = z.input<typeof unitInputSchema>;
/** What is absent stays as it is, so that nothing here may have a default; null empties. */
export const unitPatchSchema = unitInputSchema
  .omit({ maker: true, model: true, modelClass: true })
  .extend({
    source: optionalLine(120).nullable(),
    condition: optionalLine(500).nullable(),
    priceMinor: minorUnits.nullable(),
    accessories,
  })
  .partial();

export const unitQuerySchema = z.object({
  q: z.string().trim().max(100).optional(),
  state: z.enum(unitStates).optional(),
  sort: z.enum(['tag', 'model', 'state', 'received', 'changed', 'grade']).default('changed'),
  order: z.enum(['asc', 'desc']).default('desc'),
  page: z.coerce.number().int().min(1).default(1),
  pageSize: z.coerce.number().int().min(5).max(100).default(25),
});
export type UnitQuery = z.output<typeof unitQuerySchema>;

export const stateChangeSchema = z.strictObject({
  to: z.enum(unitStates),
  note: optionalLine(500),
});
export const logEntrySchema = z.strictObject({
  kind: z.enum(logKinds),
  text: line('what happened', 4000),
  minutes: z.int().min(0).max(600, 'Book at most ten hours at once.').optional(),
  costMinor: minorUnits.optional(),
  /** The entry that this one amends. */
  amends: z.string().optional(),
});
const checkIds = functionCheckItems.map((item) => item.id) as [string, ...string[]];
export const checksSchema = z.strictObject({
  checks: z
    .array(
      z.strictObject({
        item: z.enum(checkIds),
        outcome: z.enum(checkOutcomes),
        note: optionalLine(300),
      }),
    )
    .min(1, 'Mark at least one check.')
    .max(60),
});

export const runInputSchema = z.strictObject({
  title: line('a title for the run', 80),
  phase: z.enum(['before', 'after']),
});
export const shotKinds = ['target', 'scene'] as const;
export const shotInputSchema = z.strictObject({
  sha256: z.string().regex(/^[0-9a-f]{64}$/, 'Send the file’s SHA-256 as 64 hexadecimal digits.'),
  name: line('the file’s name', 255),
});
export const reanalyseSchema = z.strictObject({
  kind: z.enum(['auto', 'target', 'scene']).optional(),
});

export const signGradeSchema = z.strictObject({
  letter: z.enum(letters),
  /** Required when the letter differs from the proposal. */
  reason: optionalLine(1000),
});
export const withdrawSchema = z.strictObject({ reason: line('why the report is withdrawn', 500) });

export const targetPrintSchema = z.object({
  shape: z.enum(['4x3', '3x2']),
  paper: z.enum(['A4', 'A3', 'A2', 'A1']),
});
export type TargetPrintQuery = z.output<typeof targetPrintSchema>;
