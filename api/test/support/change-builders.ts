import { v7 } from 'uuid';
import { CONSENT_VERSION, type Change, type CostLine, type DraftChange } from '@tallypole/shared/schemas/changes';
import { made, type LentJob } from './draw-builders.ts';
import { until } from './house.ts';
import { upload } from './uploads.ts';
import type { Visitor } from './visitor.ts';

export const costLine = (more: Partial<CostLine> = {}): CostLine => ({ id: v7(), description: 'Floor joists 2×12, 16 ft', class: 'material', effect: 'add', quantity: '28', unit: 'ea', unitCost: '43.1875', taxable: true, ...more });

/** Deeper joists: what is added, what is taken out, labor and tax; not structural unless a test says so. */
export const changeDraft = (lent: LentJob, more: Partial<DraftChange> = {}): DraftChange => ({
  id: v7(),
  title: 'Deeper joists in the great room',
  reason: 'The span is longer than first drawn; deeper joists keep the floor from bouncing.',
  origin: 'design_correction',
  structural: false,
  days: 2,
  milestoneId: lent.milestoneId.Framing,
  goodUntil: '2099-03-19',
  presentation: 'itemized',
  noCharge: false,
  lines: [costLine(), costLine({ description: 'Floor joists 2×10, 16 ft', effect: 'deduct', unitCost: '29.5' }), costLine({ description: 'Carpenter', class: 'labor', quantity: '6.5', unit: 'h', unitCost: '62', taxable: false })],
  terms: null,
  termsReason: '',
  ...more,
});

export const changeAt = ({ job }: LentJob, changeId: string, act = ''): string => `/jobs/${job.id}/changes/${changeId}${act && `/${act}`}`;

export const startChange = async (lent: LentJob, more: Partial<DraftChange> = {}): Promise<Change> => made<Change>(await lent.principal.post(`/jobs/${lent.job.id}/changes`, changeDraft(lent, more)));

export async function attachReview(lent: LentJob, changeId: string): Promise<Change> {
  const fileId = v7();
  const pdf = Buffer.from('%PDF-1.4\n1 0 obj<</Type/Catalog/Pages 2 0 R>>endobj\n2 0 obj<</Type/Pages/Count 0/Kids[]>>endobj\ntrailer<</Root 1 0 R>>\n%%EOF\n');
  made(await upload(lent.principal, `/jobs/${lent.job.id}/files`, { id: fileId, purpose: 'review' }, { name: 'joist sheet.pdf', content: pdf }));
  const review = { id: v7(), kind: 'engineered_sheet', fileId, reviewerName: 'P. Wren, PE', license: 'OH 55512', reviewedOn: '2026-11-20', note: '' };
  return made<Change>(await lent.principal.post(changeAt(lent, changeId, 'reviews'), review));
}

/** Sends a change out and waits until its paper is made. */
export async function issueChange(lent: LentJob, change: Change): Promise<Change> {
  made(await lent.principal.post(changeAt(lent, change.id, 'issue'), { version: change.version }));
  return await withPaper(lent, change.id);
}

export async function withPaper(lent: LentJob, changeId: string): Promise<Change> {
  let seen: Change | undefined;
  await until(async () => {
    seen = made<Change>(await lent.ann.get(changeAt(lent, changeId)));
    return seen.document !== null;
  }, 'the paper of the change');
  if (!seen) throw new Error('unreachable');
  return seen;
}

/** What somebody sends who signs what they see. */
export const signature = (seen: Change, typedName: string) => ({ id: v7(), typedName, consent: true, consentVersion: CONSENT_VERSION, effectHash: seen.effectHash, documentSha256: seen.document?.sha256 });

export const signChange = (lent: LentJob, who: Visitor, seen: Change, typedName = 'Ann Moss', key?: string) => who.post(changeAt(lent, seen.id, 'sign'), signature(seen, typedName), key);
