import { describe, expect, it } from '@jest/globals';
import { randomBytes } from 'node:crypto';
import { readConfiguration } from './configuration.ts';

const drawn = () => randomBytes(30).toString('base64url');
const key = (id: string) => `${id}:${randomBytes(32).toString('base64url')}`;
const production = (): Record<string, string> => ({
  NODE_ENV: 'production',
  PUBLIC_URL: 'https://tally.test',
  DATABASE_WRITE_URL: 'postgres://w',
  DATABASE_READ_URL: 'postgres://r',
  DATABASE_WORKER_URL: 'postgres://k',
  QUEUE_URL: 'postgres://q',
  JWT_SECRET: drawn(),
  CODE_SECRET: drawn(),
  SECOND_FACTOR_KEYS: key('k1'),
  STRIPE_SECRET_KEY: `sk_live_${drawn()}`,
  STRIPE_WEBHOOK_SECRET: `whsec_${drawn()}`,
  SMTP_URL: 'smtps://mail.test',
  FILES_DIR: '/srv/files',
});
const bucket = () => ({ STORAGE: 's3', S3_BUCKET: 'tally', S3_ACCESS_KEY_ID: 'key', S3_SECRET_ACCESS_KEY: drawn() });

describe('the configuration', () => {
  it('is accepted in production when nothing in it is a demo', () => {
    expect(readConfiguration(production())).toMatchObject({ STORAGE: 'disk', FILES_DIR: '/srv/files', DEMO: false });
    expect(readConfiguration({ ...production(), ...bucket(), S3_ENDPOINT: 'https://s3.test' })).toMatchObject({ STORAGE: 's3', S3_PATH_STYLE: true });
  });

  it.each([
    ['DEMO: must be false in production: demo sign-ins are open to everybody', { DEMO: 'true' }],
    ['PUBLIC_URL: must begin with https:// in production', { PUBLIC_URL: 'http://tally.test' }],
    ['STRIPE_API_URL: must not be set in production: payments would go to a stand-in', { STRIPE_API_URL: 'http://127.0.0.1:4310' }],
    ["MAIL_PAGE_URL: must not be set in production: it is a page with everybody's mail", { MAIL_PAGE_URL: 'http://127.0.0.1:4320' }],
    ['JWT_SECRET: must not be a demo secret in production', { JWT_SECRET: `demo-${drawn()}` }],
    ['JWT_SECRET: must not be a demo secret in production', { JWT_SECRET: 'j'.repeat(40) }],
    ['CODE_SECRET: must not be a demo secret in production', { CODE_SECRET: `changeme${drawn()}` }],
    ['SECOND_FACTOR_KEYS (k0): must not be a demo secret in production', { SECOND_FACTOR_KEYS: `${key('k1')},k0:${'k'.repeat(43)}` }],
    ['STRIPE_SECRET_KEY: must not be a demo secret in production', { STRIPE_SECRET_KEY: 'sk_test_demo_house' }],
    ['STRIPE_WEBHOOK_SECRET: must not be a demo secret in production', { STRIPE_WEBHOOK_SECRET: 'whsec_example_1' }],
    ['S3_SECRET_ACCESS_KEY: must not be a demo secret in production', { ...bucket(), S3_SECRET_ACCESS_KEY: 'demo-secret-access-key' }],
    ['S3_ENDPOINT: must begin with https:// in production', { ...bucket(), S3_ENDPOINT: 'http://127.0.0.1:4330' }],
  ])('refuses in production with the line %j', (line, wrong) => {
    expect(() => readConfiguration({ ...production(), ...wrong })).toThrow(new Error(line));
    expect(() => readConfiguration({ ...production(), ...wrong, NODE_ENV: 'test' })).not.toThrow();
  });

  it('refuses one secret for two purposes', () => {
    const secret = drawn();
    expect(() => readConfiguration({ ...production(), JWT_SECRET: secret, CODE_SECRET: secret })).toThrow(new Error('CODE_SECRET: must differ from JWT_SECRET'));
  });

  it.each([
    ['FILES_DIR: is needed with STORAGE=disk', { FILES_DIR: '' }],
    ['STORAGE: must be disk or s3', { STORAGE: 'tape' }],
    ['S3_BUCKET: is needed with STORAGE=s3', { ...bucket(), S3_BUCKET: '' }],
    ['S3_SECRET_ACCESS_KEY: must have at least 16 characters', { ...bucket(), S3_SECRET_ACCESS_KEY: 'short' }],
    ['JWT_SECRET: must have at least 32 characters', { JWT_SECRET: 'short' }],
    ['SECOND_FACTOR_KEYS: must be id:key, more of them after commas; a key is 32 bytes in base64url (43 characters)', { SECOND_FACTOR_KEYS: `k1:${drawn()}` }],
    ['SECOND_FACTOR_KEYS: must not name two keys alike', { SECOND_FACTOR_KEYS: `${key('k1')},${key('k1')}` }],
  ])('says %j, one line for each mistake', (line, wrong) => {
    expect(() => readConfiguration({ ...production(), ...wrong })).toThrow(new Error(line));
  });
});
