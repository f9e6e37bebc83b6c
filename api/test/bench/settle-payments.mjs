// The worker's settlement of payments in a process of its own, built as it runs: takes payments by message, says how long they took.
import 'reflect-metadata';
import { NestFactory } from '@nestjs/core';
import { PaymentSettlement } from '../../dist/payments/payment-settlement.js';
import { StripeClient } from '../../dist/payments/stripe-client.js';
import { WorkerModule } from '../../dist/worker.module.js';

const app = await NestFactory.createApplicationContext(WorkerModule, { logger: ['error'] });
// Stripe answers at once, since its speed is not what is measured
Object.assign(app.get(StripeClient), {
  session: async (_account, id) => ({ id, status: 'complete', url: null, expiresAt: new Date('2099-01-01'), intentId: id.replace('cs_', 'pi_'), paymentId: id.slice('cs_'.length) }),
  payment: async (_account, intentId) => ({ intentId, paymentId: intentId.slice('pi_'.length), status: 'succeeded', attempted: true, receivedCents: 1, feeCents: 0, failure: null, failureCode: null, refunds: [], disputes: [] }),
});
const settlement = app.get(PaymentSettlement);

process.on('message', async ({ payments, clients }) => {
  const before = performance.now();
  await Promise.all(Array.from({ length: clients }, async () => {
    for (let next = payments.pop(); next; next = payments.pop()) await settlement.check(next.firm, next.id);
  }));
  process.send({ took: performance.now() - before });
});
process.once('disconnect', () => void app.close().finally(() => process.exit(0)));
process.send('ready');
