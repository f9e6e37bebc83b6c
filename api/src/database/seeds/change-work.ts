import { v7 } from 'uuid';
import { CONSENT_VERSION, type Change, type CostLine, type DraftChange } from '@tallypole/shared/schemas/changes';
import type { Persona } from './persona.ts';
import type { SeedWorker } from './seed-worker.ts';

const line = (description: string, more: Partial<CostLine>): CostLine => ({ id: v7(), description, class: 'material', effect: 'add', quantity: '1', unit: 'ea', unitCost: '0', taxable: true, ...more });

const base = (milestoneId: string | null, goodUntil: string): Omit<DraftChange, 'title' | 'reason' | 'lines' | 'origin' | 'days'> => ({
  id: v7(), structural: false, milestoneId, goodUntil, presentation: 'itemized', noCharge: false, terms: null, termsReason: '',
});

/** The demo's changes, all invented. */
export const demoChanges = {
  window: (milestoneId: string, goodUntil: string): DraftChange => ({
    ...base(milestoneId, goodUntil), title: 'A wider window at the breakfast table', origin: 'homeowner_wish', days: 0,
    reason: 'You asked for more morning light where the table will stand. The opening grows from four to six feet; its header stays within the prescriptive table on the plans.',
    lines: [line('Window, 6 ft, triple glazed', { unitCost: '1480' }), line('Window, 4 ft, as drawn', { effect: 'deduct', unitCost: '890' }), line('Carpenter', { class: 'labor', quantity: '3.5', unit: 'h', unitCost: '62', taxable: false })],
  }),
  deck: (goodUntil: string): DraftChange => ({
    ...base(null, goodUntil), title: 'A deck off the living room', origin: 'homeowner_wish', days: 6,
    reason: 'A ten by fourteen foot deck with stairs to the garden, built while the crew is here.',
    lines: [line('Deck lumber and hardware', { unitCost: '5240' }), line('Deck crew', { class: 'subcontract', unit: 'job', unitCost: '4300', taxable: false })],
  }),
  beam: (milestoneId: string, goodUntil: string): DraftChange => ({
    ...base(milestoneId, goodUntil), title: 'A flush beam over the kitchen opening', origin: 'design_correction', structural: true, days: 2,
    reason: 'With the pantry wall gone the opening is fourteen feet wide. A flush beam carries the floor above it, so that the ceiling runs through without a step.',
    lines: [
      line('Laminated beam, 14 ft, three plies', { quantity: '3', unitCost: '268.5' }),
      line('Hangers and posts', { unitCost: '394.6' }),
      line('Dropped header, as drawn', { effect: 'deduct', unitCost: '312' }),
      line('Carpenters, two', { class: 'labor', quantity: '14', unit: 'h', unitCost: '62', taxable: false }),
      line('Crane, half a day', { class: 'equipment', unit: 'half day', unitCost: '480', taxable: false }),
    ],
  }),
  tile: (milestoneId: string, goodUntil: string): DraftChange => ({
    ...base(milestoneId, goodUntil), title: 'Tile to the ceiling in the upstairs bath', origin: 'homeowner_wish', days: 1,
    reason: 'Tile on all walls of the shower up to the ceiling, in the size you chose.',
    lines: [line('Tile', { quantity: '86', unit: 'sq ft', unitCost: '7.85' }), line('Tile setter', { class: 'subcontract', unit: 'job', unitCost: '1150', taxable: false })],
  }),
};

export class ChangeWork {
  constructor(
    private readonly jobId: string,
    private readonly worker: SeedWorker,
  ) {}

  draft = (manager: Persona, draft: DraftChange) => manager.post<Change>(`jobs/${this.jobId}/changes`, draft);

  /** Sends it out and lets its paper be made. */
  async issue(manager: Persona, { id, version }: Change): Promise<void> {
    await manager.post(`jobs/${this.jobId}/changes/${id}/issue`, { version });
    await this.worker.work();
  }

  async review(manager: Persona, changeId: string, reviewedOn: string): Promise<Change> {
    const fileId = v7();
    const sheet = Buffer.from('%PDF-1.4\n1 0 obj<</Type/Catalog/Pages 2 0 R>>endobj\n2 0 obj<</Type/Pages/Count 1/Kids[3 0 R]>>endobj\n3 0 obj<</Type/Page/Parent 2 0 R/MediaBox[0 0 612 792]/Resources<<>>>>endobj\ntrailer<</Root 1 0 R>>\n%%EOF\n');
    await manager.upload(`jobs/${this.jobId}/files`, { id: fileId, purpose: 'review' }, { name: 'Beam sheet, sealed.pdf', type: 'application/pdf', content: sheet });
    const body = { id: v7(), kind: 'engineered_sheet', fileId, reviewerName: 'Greta Lindqvist, PE', license: 'OH 70417', reviewedOn, note: 'Bearing and posts as on the sheet.' };
    return await manager.post<Change>(`jobs/${this.jobId}/changes/${changeId}/reviews`, body);
  }

  async sign(homeowner: Persona, changeId: string, typedName: string): Promise<void> {
    const seen = await homeowner.get<Change>(`jobs/${this.jobId}/changes/${changeId}`);
    await homeowner.post(`jobs/${this.jobId}/changes/${changeId}/sign`, { id: v7(), typedName, consent: true, consentVersion: CONSENT_VERSION, effectHash: seen.effectHash, documentSha256: seen.document?.sha256 });
    await this.worker.work();
  }

  decline = (homeowner: Persona, changeId: string, reason: string) => homeowner.post(`jobs/${this.jobId}/changes/${changeId}/decline`, { reason });
}
