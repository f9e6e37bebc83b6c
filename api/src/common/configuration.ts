import { z } from 'zod';

const secret = z.string().min(32, 'must have at least 32 characters');
const postgres = z.string().regex(/^postgres(ql)?:\/\//, 'must begin with postgres://');

const Environment = z
  .object({
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
    STRIPE_SECRET_KEY: z.string().min(8),
    STRIPE_WEBHOOK_SECRET: z.string().min(8),
    STRIPE_API_URL: z.url().optional(),
    SMTP_URL: z.string().regex(/^smtps?:\/\//, 'must begin with smtp:// or smtps://'),
    MAIL_FROM: z.email().default('tallypole@example.com'),
    MAIL_PAGE_URL: z.url().optional(),
    FILES_DIR: z.string().min(1),
    PORTAL_DIST: z.string().min(1).optional(),
    DEMO: z.stringbool().default(false),
    LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'silent']).default('info'),
  })
  .superRefine((env, context) => {
    if (env.NODE_ENV !== 'production') return;
    const refuse = (path: string, message: string) => context.addIssue({ code: 'custom', path: [path], message });
    if (env.DEMO) refuse('DEMO', 'must be false in production: demo sign-ins are open to everybody');
    if (!env.PUBLIC_URL.startsWith('https://')) refuse('PUBLIC_URL', 'must begin with https:// in production');
    for (const name of ['JWT_SECRET', 'CODE_SECRET', 'STRIPE_SECRET_KEY', 'STRIPE_WEBHOOK_SECRET'] as const) {
      if (/demo|example|changeme/i.test(env[name])) refuse(name, 'must not be a demo secret in production');
    }
  });

export type Configuration = z.infer<typeof Environment>;
/** Injection token of the validated configuration. */
export const CONFIGURATION = Symbol('configuration');

/** Reads the environment; throws an Error with one line per wrong variable. An empty variable counts as not set. */
export function readConfiguration(environment: NodeJS.ProcessEnv): Configuration {
  const given = Object.fromEntries(Object.entries(environment).filter(([, value]) => value !== ''));
  const parsed = Environment.safeParse(given);
  if (parsed.success) return parsed.data;
  throw new Error(parsed.error.issues.map((issue) => `${issue.path.join('.')}: ${issue.message}`).join('\n'));
}
