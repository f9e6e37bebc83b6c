import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { start } from '../../../mocks/stripe/server.mjs';
import { freePort, type House } from './house.ts';

export interface Delivery {
  id: string;
  event: string;
  type: string;
  state: string;
  attempts: { status?: number }[];
}

/** The Stripe stand-in in this process, with its control surface; debits move only when a test says so. */
export class StripeStandIn {
  private running: { close: () => Promise<void> } | undefined;
  private readonly dataDir = mkdtempSync(path.join(tmpdir(), 'tally-stripe-'));
  readonly url: string;
  private webhookUrl: string | undefined;

  private constructor(private readonly port: number) {
    this.url = `http://127.0.0.1:${port}`;
  }

  /** Points a house at a stand-in that is started afterwards, since either side must know the other's address. */
  static async for(house: House): Promise<StripeStandIn> {
    const standIn = new StripeStandIn(await freePort());
    house.env['STRIPE_API_URL'] = standIn.url;
    return standIn;
  }

  async start(webUrl = this.webhookUrl): Promise<void> {
    this.webhookUrl = webUrl;
    const webhook = webUrl ? { webhookUrl: `${webUrl}/api/payments/webhook`, webhookSecret: 'whsec_demo_house' } : {};
    this.running = await start({ port: this.port, dataDir: this.dataDir, settleAfterMs: -1, returnAfterMs: -1, retryBaseMs: 200, log: () => undefined, ...webhook });
  }

  /** The service is down; what it knows stays. */
  async stop(): Promise<void> {
    await this.running?.close();
    this.running = undefined;
  }

  async close(): Promise<void> {
    await this.stop();
    rmSync(this.dataDir, { recursive: true, force: true });
  }

  async control<T = unknown>(where: string, wish: object = {}, method = 'POST'): Promise<T> {
    // a kept connection could be one to a stand-in that was stopped since
    const headers = { connection: 'close', ...(method === 'GET' ? {} : { 'content-type': 'application/json' }) };
    const answer = await fetch(`${this.url}/_control/${where}`, { method, headers, ...(method === 'GET' ? {} : { body: JSON.stringify(wish) }) });
    const found = (await answer.json()) as T & { error?: { message: string } };
    if (!answer.ok) throw new Error(`${where}: ${found.error?.message ?? answer.status}`);
    return found;
  }

  /** Asks the API as the platform does, on a connected account. */
  async api<T>(where: string, account: string): Promise<T> {
    const answer = await fetch(`${this.url}/v1/${where}`, { headers: { authorization: 'Bearer sk_test_demo_house', 'stripe-account': account } });
    return (await answer.json()) as T;
  }

  /** Does something on a connected account, as its owner would in the payment service's own pages. */
  async send<T>(where: string, account: string, fields: Record<string, string>): Promise<T> {
    const headers = { authorization: 'Bearer sk_test_demo_house', 'stripe-account': account, 'content-type': 'application/x-www-form-urlencoded' };
    const answer = await fetch(`${this.url}/v1/${where}`, { method: 'POST', headers, body: new URLSearchParams(fields) });
    if (!answer.ok) throw new Error(await answer.text());
    return (await answer.json()) as T;
  }

  async deliveries(query = ''): Promise<Delivery[]> {
    return (await this.control<{ data: Delivery[] }>(`deliveries${query}`, {}, 'GET')).data;
  }
}
