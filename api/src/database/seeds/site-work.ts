import { v7 } from 'uuid';
import type { Draw } from '@tallypole/shared/schemas/draws';
import type { MilestoneList } from '@tallypole/shared/schemas/milestones';
import type { Persona } from './persona.ts';
import { drawnPhoto, type Scene } from './pictures.ts';

export const sitePlace = { latitude: 39.4012, longitude: -84.5613 };

/** Acts on milestones and draws that the demo's jobs have in common. */
export class SiteWork {
  constructor(readonly jobId: string) {}

  async version(who: Persona, milestoneId: string): Promise<number> {
    const { items } = await who.get<MilestoneList>(`jobs/${this.jobId}/milestones`);
    return items.find(({ id }) => id === milestoneId)?.version ?? 0;
  }

  async photograph(who: Persona, milestoneId: string, scene: Scene, takenAt: readonly Date[]): Promise<string[]> {
    const ids: string[] = [];
    for (const [variant, instant] of takenAt.entries()) {
      const id = v7();
      const content = await drawnPhoto({ scene, variant, takenAt: instant, latitude: sitePlace.latitude + variant * 0.00005, longitude: sitePlace.longitude });
      await who.upload(`jobs/${this.jobId}/photos`, { id, milestoneId, note: '' }, { name: `IMG_${1200 + variant}.jpg`, type: 'image/jpeg', content });
      ids.push(id);
    }
    return ids;
  }

  async start(who: Persona, milestoneId: string): Promise<void> {
    await who.post(`jobs/${this.jobId}/milestones/${milestoneId}/start`, { version: await this.version(who, milestoneId) });
  }

  async claim(who: Persona, milestoneId: string, note: string): Promise<void> {
    await who.post(`jobs/${this.jobId}/milestones/${milestoneId}/claim`, { version: await this.version(who, milestoneId), note });
  }

  async inspect(who: Persona, milestoneId: string, seenOn: string, result: 'passed' | 'partial', note: string, percent?: number): Promise<void> {
    const body = { id: v7(), version: await this.version(who, milestoneId), result, seenOn, note, ...(percent === undefined ? {} : { percent }) };
    await who.post(`jobs/${this.jobId}/milestones/${milestoneId}/inspections`, body);
  }

  /** Drafted from what is proven, with photos, and sent. */
  async sendDraw(books: Persona, throughOn: string, photoIds: readonly string[]): Promise<Draw> {
    const draft = await books.post<Draw>(`jobs/${this.jobId}/draws`, { id: v7(), throughOn });
    const at = `jobs/${this.jobId}/draws/${draft.id}`;
    const shown = photoIds.length > 0 ? await books.post<Draw>(`${at}/photos`, { version: draft.version, photoIds }) : draft;
    return await books.post<Draw>(`${at}/submit`, { version: shown.version });
  }

  async approve(homeowner: Persona, drawId: string): Promise<Draw> {
    const { effectHash } = await homeowner.get<Draw>(`jobs/${this.jobId}/draws/${drawId}`);
    return await homeowner.post<Draw>(`jobs/${this.jobId}/draws/${drawId}/approvals`, { id: v7(), effectHash });
  }

  async recordCheck(books: Persona, drawId: string | null, amountCents: number, receivedOn: string, reference: string): Promise<void> {
    await books.post(`jobs/${this.jobId}/payments`, { id: v7(), drawId, method: 'check', source: 'homeowner', amountCents, receivedOn, reference });
  }
}
