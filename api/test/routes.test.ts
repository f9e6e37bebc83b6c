import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { readFileSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { v7 } from 'uuid';
import { permissions } from '@tallypole/shared/schemas/permissions';
import { createJob, join, principalWithFirm } from './support/builders.ts';
import { House } from './support/house.ts';
import { Visitor } from './support/visitor.ts';

interface Operation {
  'x-access'?: string;
  'x-rate'?: string;
}
interface Document {
  paths: Record<string, Record<string, Operation>>;
}

const committed = path.join(import.meta.dirname, '../openapi.json');
/** Routes that carry no session by design. */
const PUBLIC = ['GET /api/demo/people', 'GET /api/health', 'GET /api/health/ready', 'POST /api/auth/address/undo', 'POST /api/auth/codes', 'POST /api/auth/refresh', 'POST /api/auth/sessions', 'POST /api/auth/sessions/by-password', 'POST /api/auth/sessions/second-step', 'POST /api/guest/visits', 'POST /api/payments/webhook'];
const REFUSED = [401, 403, 404];

describe('every route', () => {
  let house: House;
  let url: string;
  let document: Document;
  let operations: { method: string; path: string; operation: Operation }[];

  beforeAll(async () => {
    house = await House.open({ NODE_ENV: 'development' });
    await house.worker();
    ({ url } = await house.web());
    document = (await (await fetch(`${url}/api/openapi.json`)).json()) as Document;
    operations = Object.entries(document.paths).flatMap(([route, methods]) => Object.entries(methods).map(([method, operation]) => ({ method: method.toUpperCase(), path: route, operation })));
  });
  afterAll(() => house.close());

  it('stands in the committed OpenAPI document (UPDATE_OPENAPI=1 writes it anew)', () => {
    const text = `${JSON.stringify(document, null, 1)}\n`;
    if (process.env['UPDATE_OPENAPI']) writeFileSync(committed, text);
    expect(text).toBe(readFileSync(committed, 'utf8'));
  });

  it('declares who may use it and how often', () => {
    const known = [...Object.keys(permissions), 'public', 'guest', 'signed_in'];
    const bare = operations.filter(({ operation }) => !known.includes(operation['x-access'] ?? '') || !operation['x-rate']);
    expect(bare.map(({ method, path: route }) => `${method} ${route}`)).toEqual([]);
    const open = operations.filter(({ operation }) => operation['x-access'] === 'public').map(({ method, path: route }) => `${method} ${route}`).sort();
    expect(open.filter((route) => !PUBLIC.includes(route))).toEqual([]);
  });

  it('is closed to whoever is not signed in', async () => {
    const nobody = new Visitor(house, url, 'nobody@example.com');
    for (const { method, path: route, operation } of operations) {
      if (operation['x-access'] === 'public') continue;
      const at = route.replace('/api', '').replace(/\{[^}]+\}/g, v7());
      const answer = method === 'GET' ? await nobody.get(at) : await nobody.post(at);
      expect([method, route, answer.status]).toEqual([method, route, method === 'GET' || method === 'POST' ? 401 : answer.status]);
    }
  });

  it('shows nothing of a job to people of another firm or another job', async () => {
    const { principal, firmId } = await principalWithFirm(house, url);
    const job = await createJob(principal, firmId);
    const { principal: stranger, firmId: otherFirm } = await principalWithFirm(house, url);
    const otherJob = await createJob(stranger, otherFirm);
    const others = [stranger, await join(stranger, otherJob.id, 'homeowner'), await join(stranger, otherJob.id, 'lender'), await join(stranger, otherJob.id, 'inspector')];
    for (const { method, path: route } of operations.filter((found) => found.path.includes('{jobId}'))) {
      const at = route.replace('/api', '').replace('{jobId}', job.id).replace(/\{[^}]+\}/g, v7());
      for (const other of others) {
        const answer = method === 'GET' ? await other.get(at) : await other.post(at);
        // a body that isn't right is refused before anything is looked up, which tells nothing either
        const refused = method === 'GET' ? REFUSED : [...REFUSED, 400, 415];
        expect([method, route, refused.includes(answer.status) ? 'refused' : answer.status]).toEqual([method, route, 'refused']);
      }
    }
  });
});
