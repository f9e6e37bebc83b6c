import { z } from 'zod';

const secret = z.string().min(32, 'must have at least 32 characters');
const postgres = z.string().regex(/^postgres(ql)?:\/\//, 'must begin with postgres://');

const KEY_RING = /^[a-z0-9]{1,16}:[A-Za-z0-9_-]{43}(,[a-z0-9]{1,16}:[A-Za-z0-9_-]{43})*$/;
const keysOf = (ring: string): string[][] => ring.split(',').map((entry) => entry.split(':'));
/** Keys that encrypt the secrets of second steps; the first one is current, the others still decrypt. */
const keyRing = z
  .string()
  .regex(KEY_RING, 'must be id:key, more of them after commas; a key is 32 bytes in base64url (43 characters)')
  .refine((ring) => new Set(keysOf(ring).map(([id]) => id)).size === keysOf(ring).length, 'must not name two keys alike');

/** Where files are kept: a folder of this machine, or a bucket of an S3-compatible store. */
const storage = z.discriminatedUnion('STORAGE', [
  z.object({ STORAGE: z.literal('disk'), FILES_DIR: z.string({ error: 'is needed with STORAGE=disk' }).min(1) }),
  z.object({
    STORAGE: z.literal('s3'),
    S3_ENDPOINT: z.url({ protocol: /^https?$/ }).optional(),
    S3_REGION: z.string().min(1).default('us-east-1'),
    S3_BUCKET: z.string({ error: 'is needed with STORAGE=s3' }).min(3),
    S3_ACCESS_KEY_ID: z.string({ error: 'is needed with STORAGE=s3' }).min(3),
    S3_SECRET_ACCESS_KEY: z.string({ error: 'is needed with STORAGE=s3' }).min(16, 'must have at least 16 characters'),
    S3_PATH_STYLE: z.stringbool().default(true),
  }),
], { error: 'must be disk or s3' });

const running = z.object({
  NODE_ENV: z.enum(['development', 'test', 'production']).default('development'),
  PORT: z.coerce.number().int().min(1).max(65_535).default(4300),
  PUBLIC_URL: z.url().default('http://127.0.0.1:4300'),
  DATABASE_WRITE_URL: postgres,
  DATABASE_READ_URL: postgres,
  DATABASE_WORKER_URL: postgres,
  QUEUE_URL: postgres,
  DATABASE_POOL: z.coerce.number().int().min(1).max(100).default(8),
  JWT_SECRET: secret,
  CODE_SECRET: secret,
  SECOND_FACTOR_KEYS: keyRing,
  REQUIRE_SECOND_FACTOR: z.stringbool().optional(),
  STRIPE_SECRET_KEY: z.string().min(8),
  STRIPE_WEBHOOK_SECRET: z.string().min(8),
  STRIPE_API_URL: z.url().optional(),
  SMTP_URL: z.string().regex(/^smtps?:\/\//, 'must begin with smtp:// or smtps://'),
  MAIL_FROM: z.email().default('tallypole@example.com'),
  MAIL_PAGE_URL: z.url().optional(),
  PORTAL_DIST: z.string().min(1).optional(),
  DEMO: z.stringbool().default(false),
  LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'silent']).default('info'),
});

export type StorageSettings = z.infer<typeof storage>;
export type Configuration = z.infer<typeof running> & StorageSettings;
/** Injection token of the validated configuration. */
export const CONFIGURATION = Symbol('configuration');

/** Reads the environment; throws an Error with one line per wrong variable. An empty variable counts as not set. */
export function readConfiguration(environment: NodeJS.ProcessEnv): Configuration {
  const read = [running.safeParse(given(environment)), storage.safeParse(given(environment))] as const;
  const configuration = { ...read[0].data, ...read[1].data } as Configuration;
  const wrong = read.flatMap(({ error }) => error?.issues.map(({ path, message }) => `${path.join('.')}: ${message}`) ?? []);
  if (wrong.length === 0 && configuration.NODE_ENV === 'production') wrong.push(...unfitForProduction(configuration));
  if (wrong.length > 0) throw new Error(wrong.join('\n'));
  return configuration;
}

/** The part of the environment that says where files are, for commands that need no more. */
export function readStorageSettings(environment: NodeJS.ProcessEnv): StorageSettings {
  const { data, error } = storage.safeParse(given(environment));
  if (data) return data;
  throw new Error(error.issues.map(({ path, message }) => `${path.join('.')}: ${message}`).join('\n'));
}

const given = (environment: NodeJS.ProcessEnv) => ({ STORAGE: 'disk', ...Object.fromEntries(Object.entries(environment).filter(([, value]) => value !== '')) });

/** What a server may not have in production, a line each. */
function unfitForProduction(configuration: Configuration): string[] {
  const wrong: string[] = [];
  if (configuration.DEMO) wrong.push('DEMO: must be false in production: demo sign-ins are open to everybody');
  if (!configuration.PUBLIC_URL.startsWith('https://')) wrong.push('PUBLIC_URL: must begin with https:// in production');
  if (configuration.STRIPE_API_URL) wrong.push('STRIPE_API_URL: must not be set in production: payments would go to a stand-in');
  if (configuration.MAIL_PAGE_URL) wrong.push('MAIL_PAGE_URL: must not be set in production: it is a page with everybody\'s mail');
  const { JWT_SECRET, CODE_SECRET, STRIPE_SECRET_KEY, STRIPE_WEBHOOK_SECRET } = configuration;
  const secrets: Record<string, string> = { JWT_SECRET, CODE_SECRET, STRIPE_SECRET_KEY, STRIPE_WEBHOOK_SECRET };
  for (const [id = '', key = ''] of keysOf(configuration.SECOND_FACTOR_KEYS)) secrets[`SECOND_FACTOR_KEYS (${id})`] = key;
  if (configuration.STORAGE === 's3') {
    secrets['S3_SECRET_ACCESS_KEY'] = configuration.S3_SECRET_ACCESS_KEY;
    if (configuration.S3_ENDPOINT?.startsWith('http://')) wrong.push('S3_ENDPOINT: must begin with https:// in production');
  }
  for (const [name, value] of Object.entries(secrets)) if (isDemoSecret(value)) wrong.push(`${name}: must not be a demo secret in production`);
  if (JWT_SECRET === CODE_SECRET) wrong.push('CODE_SECRET: must differ from JWT_SECRET');
  return wrong;
}

/** Words of examples, or hardly any different characters: nobody drew that by lot. */
const isDemoSecret = (value: string): boolean => /demo|example|change.?me|secret|password/i.test(value) || new Set(value).size < 8;
