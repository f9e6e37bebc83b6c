// The Stripe stand-in as a process. Sends 'ready' to its parent.
import { mkdirSync } from 'node:fs';
import { start } from '../stripe/server.mjs';

const { STRIPE_PORT, STRIPE_DATA, STRIPE_WEBHOOK_URL, STRIPE_WEBHOOK_SECRET, STRIPE_SETTLE_AFTER_MS } = process.env;
if (!STRIPE_PORT || !STRIPE_DATA || !STRIPE_WEBHOOK_URL || !STRIPE_WEBHOOK_SECRET) {
  throw new Error('STRIPE_PORT, STRIPE_DATA, STRIPE_WEBHOOK_URL and STRIPE_WEBHOOK_SECRET are needed');
}
mkdirSync(STRIPE_DATA, { recursive: true });
await start({
  port: Number(STRIPE_PORT),
  dataDir: STRIPE_DATA,
  webhookUrl: STRIPE_WEBHOOK_URL,
  webhookSecret: STRIPE_WEBHOOK_SECRET,
  settleAfterMs: Number(STRIPE_SETTLE_AFTER_MS),
});
process.send?.('ready');
