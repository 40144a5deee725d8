import 'server-only';
import { availableParallelism } from 'node:os';
import { z } from 'zod';

const schema = z.object({
  NODE_ENV: z.enum(['development', 'test', 'production']).default('development'),
  DATABASE_URL: z.url({ protocol: /^(mysql|mariadb)$/ }),
  /** Where people reach the product; links in mails and reports begin with it. */
  APP_URL: z.url().default('http://localhost:3000'),
  /** Signs session cookies. */
  AUTH_SECRET: z.string().min(32),
  S3_ENDPOINT: z.url().optional(),
  S3_REGION: z.string().default('us-east-1'),
  S3_BUCKET: z.string().min(3),
  S3_KEY: z.string().min(1),
  S3_SECRET: z.string().min(1),
  SMTP_URL: z.url({ protocol: /^smtps?$/ }),
  MAIL_FROM: z.string().default('Mendlight <mendlight@localhost>'),
  /** The start command's own services and the demo shop: sign-in lines are shown. */
  LOCAL_MODE: z
    .enum(['0', '1'])
    .default('0')
    .transform((value) => value === '1'),
  /** Analyses at a time in this process; 0 leaves them to `npm run worker`. */
  WORKERS: z.coerce.number().int().min(0).max(64).default(availableParallelism()),
});
export type Env = z.output<typeof schema>;

let parsed: Env | undefined;

/** The settings, parsed once; the only place that reads the environment. */
export function env(): Env {
  parsed ??= schema.parse(process.env);
  return parsed;
}
