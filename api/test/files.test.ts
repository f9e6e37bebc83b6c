import { afterAll, beforeAll, describe, expect, it } from '@jest/globals';
import { readdirSync } from 'node:fs';
import { connect } from 'node:net';
import { v7 } from 'uuid';
import type { StoredFile } from '@tallypole/shared/schemas/files';
import { createJob, join, principalWithFirm } from './support/builders.ts';
import { House, until } from './support/house.ts';
import { download, pdf, sha256, upload } from './support/uploads.ts';
import type { Visitor } from './support/visitor.ts';

const keptFiles = (house: House): string[] =>
  readdirSync(house.env['FILES_DIR'] ?? '', { recursive: true, withFileTypes: true }).filter((entry) => entry.isFile()).map((entry) => `${entry.parentPath}/${entry.name}`);

describe('files of a job', () => {
  let house: House;
  let principal: Visitor;
  let homeowner: Visitor;
  let designer: Visitor;
  let jobId: string;

  beforeAll(async () => {
    house = await House.open();
    await house.worker();
    const { url } = await house.web();
    const made = await principalWithFirm(house, url);
    ({ principal } = made);
    ({ id: jobId } = await createJob(principal, made.firmId));
    [homeowner, designer] = [await join(principal, jobId, 'homeowner'), await join(principal, jobId, 'designer')];
  });
  afterAll(() => house.close());

  const add = (fields: Partial<Record<'id' | 'purpose', string>> = {}, name = 'beam calculation.pdf', content = pdf()) =>
    upload(principal, `/jobs/${jobId}/files`, { id: v7(), purpose: 'review', ...fields }, { name, content });

  it('keeps a PDF under its SHA-256 and hands it out as a download that cannot run', async () => {
    const content = pdf('Façade');
    const added = await add({}, 'façade "v2".pdf', content);
    expect(added.status).toBe(201);
    const file = added.body as StoredFile;
    expect(file).toMatchObject({ name: 'façade _v2_.pdf', mediaType: 'application/pdf', bytes: content.length, sha256: sha256(content) });
    const got = await download(homeowner, `/jobs/${jobId}/files/${file.id}`);
    expect([got.status, got.content.equals(content)]).toEqual([200, true]);
    expect(got.headers.get('content-disposition')).toBe(`attachment; filename="fa?ade _v2_.pdf"; filename*=UTF-8''fa%C3%A7ade%20_v2_.pdf`);
    expect(got.headers.get('x-content-type-options')).toBe('nosniff');
    expect(got.headers.get('content-security-policy')).toContain('sandbox');
    expect(got.headers.get('content-type')).toBe('application/pdf');
  });

  it('takes the same id once: the same content is answered again, other content refused, and no bytes are left over', async () => {
    const id = v7();
    const content = pdf('once');
    const first = await add({ id }, 'once.pdf', content);
    const before = keptFiles(house).length;
    const again = await add({ id }, 'once.pdf', content);
    expect([again.status, again.headers['idempotency-replayed'], again.body]).toEqual([201, 'true', first.body]);
    const other = await add({ id }, 'once.pdf', pdf('other'));
    expect([other.status, (other.body as { code: string }).code]).toEqual([409, 'key_reused']);
    expect(keptFiles(house)).toHaveLength(before);
  });

  it.each([
    ['text with the name of a picture', 'site.jpg', Buffer.from('Not a picture at all.'), 415],
    ['a PDF with the name of a picture', 'site.jpg', pdf(), 415],
    ['a page of markup', 'plan.pdf', Buffer.from('<!doctype html><script>alert(1)</script>'), 415],
    ['nothing', 'empty.pdf', Buffer.alloc(0), 422],
    ['more than 30 MB', 'large.pdf', Buffer.concat([pdf(), Buffer.alloc(60_000_000)]), 413],
  ])('refuses %s and keeps nothing of it', async (_what, name, content, status) => {
    const before = keptFiles(house).length;
    const answer = await add({}, name, content);
    expect(answer.status).toBe(status);
    if (status === 413) expect((answer.body as { detail: string }).detail).toBe('The file must be smaller than 30 MB.');
    await until(() => keptFiles(house).length === before, 'the refused upload to be gone');
  });

  it('names a missing file and a wrong field', async () => {
    const none = await upload(principal, `/jobs/${jobId}/files`, { id: v7(), purpose: 'review' });
    expect((none.body as { errors: object[] }).errors).toEqual([{ pointer: '/file', code: 'missing', message: 'Choose a file.' }]);
    const wrong = await add({ purpose: 'photo' });
    expect([wrong.status, (wrong.body as { errors: { pointer: string }[] }).errors.map(({ pointer }) => pointer)]).toEqual([400, ['/purpose']]);
  });

  it('keeps nothing of an upload that breaks off half way', async () => {
    const before = keptFiles(house).length;
    const { hostname, port } = new URL(principal.url);
    const socket = connect(Number(port), hostname);
    socket.on('error', () => undefined);
    const head = `--b\r\ncontent-disposition: form-data; name="file"; filename="a.pdf"\r\n\r\n`;
    socket.write(`POST /api/jobs/${jobId}/files HTTP/1.1\r\nHost: ${hostname}\r\nOrigin: ${principal.url}\r\nCookie: ${principal.cookie()}\r\nContent-Type: multipart/form-data; boundary=b\r\nContent-Length: 900000\r\n\r\n${head}`);
    socket.write(Buffer.concat([pdf(), Buffer.alloc(200_000)]));
    await until(() => keptFiles(house).some((file) => file.includes('arriving')), 'the first bytes to arrive');
    socket.destroy();
    await until(() => keptFiles(house).length === before, 'the broken upload to be gone');
  });

  it('shows invoices to the firm alone, contracts to who may see money, and nothing to strangers', async () => {
    const invoice = (await add({ purpose: 'invoice' })).body as StoredFile;
    const contract = (await add({ purpose: 'contract' })).body as StoredFile;
    const { principal: stranger } = await principalWithFirm(house, principal.url);
    const seen = async (visitor: Visitor, file: StoredFile) => (await download(visitor, `/jobs/${jobId}/files/${file.id}`)).status;
    expect([await seen(principal, invoice), await seen(homeowner, invoice), await seen(designer, invoice)]).toEqual([200, 404, 404]);
    expect([await seen(principal, contract), await seen(homeowner, contract), await seen(designer, contract)]).toEqual([200, 200, 404]);
    expect([await seen(stranger, contract), (await upload(stranger, `/jobs/${jobId}/files`, { id: v7(), purpose: 'other' }, { name: 'a.pdf', content: pdf() })).status]).toEqual([404, 404]);
    expect((await upload(homeowner, `/jobs/${jobId}/files`, { id: v7(), purpose: 'other' }, { name: 'a.pdf', content: pdf() })).status).toBe(403);
    expect((await upload(designer, `/jobs/${jobId}/files`, { id: v7(), purpose: 'invoice' }, { name: 'a.pdf', content: pdf() })).status).toBe(403);
  });
});
