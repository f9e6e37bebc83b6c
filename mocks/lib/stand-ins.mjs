import path from 'node:path';
import { Failure } from './failure.mjs';

/** Where Stripe, or its stand-in, sends events. */
const webhookPath = '/api/payments/webhook';

/** The one bucket of the storage stand-in, and who may use it. */
const demoBucket = { S3_BUCKET: 'tallypole-demo', S3_ACCESS_KEY_ID: 'demo-access-key', S3_SECRET_ACCESS_KEY: 'demo-secret-access-key' };

/** What web and worker need to keep their files in the stand-in. @param {number} port */
export const storageStandIn = (port) => ({ S3_ENDPOINT: `http://127.0.0.1:${port}`, ...demoBucket });

/**
 * Starts the local stand-ins for what .env points at nothing real.
 * @param {import('./house.mjs').House} house
 * @param {{ ports: Partial<ReturnType<import('./settings.mjs').portsOf>>, env: Record<string, string>, data: string }} options
 */
export async function startStandIns(house, { ports, env, data }) {
  const starting = [];
  if (ports.smtp && ports.mailPage) {
    const mail = { SMTP_PORT: String(ports.smtp.port), MAIL_PAGE_PORT: String(ports.mailPage.port), MAIL_DIR: path.join(data, 'mail') };
    starting.push(ready(house, 'mail server', ['mocks/mail/main.mjs'], mail));
  }
  if (ports.stripe && ports.web) {
    const stripe = {
      STRIPE_PORT: String(ports.stripe.port),
      STRIPE_DATA: path.join(data, 'stripe'),
      STRIPE_WEBHOOK_URL: `http://127.0.0.1:${ports.web.port}${webhookPath}`,
      STRIPE_WEBHOOK_SECRET: env['STRIPE_WEBHOOK_SECRET'],
      STRIPE_SETTLE_AFTER_MS: env['STRIPE_SETTLE_AFTER_MS'] ?? '20000',
    };
    starting.push(ready(house, 'Stripe stand-in', ['mocks/lib/stripe-process.mjs'], stripe));
  }
  if (ports.storage) {
    const storage = { STORAGE_PORT: String(ports.storage.port), STORAGE_DATA: path.join(data, 'storage'), ...demoBucket };
    starting.push(ready(house, 'storage stand-in', ['mocks/lib/storage-process.mjs'], storage));
  }
  await Promise.all(starting);
}

/**
 * @param {import('./house.mjs').House} house
 * @param {string} name
 * @param {string[]} args
 * @param {Record<string, string | undefined>} env
 * @returns {Promise<void>}
 */
function ready(house, name, args, env) {
  return new Promise((resolve, reject) => {
    const child = house.service(name, args, { env, output: 'errors', standIn: true });
    const bomb = setTimeout(() => reject(new Failure(`The ${name} did not become ready within 30 seconds.`)), 30_000);
    child.once('message', () => {
      clearTimeout(bomb);
      resolve();
    });
    child.once('exit', () => clearTimeout(bomb)); // the house says so and stops
  });
}
