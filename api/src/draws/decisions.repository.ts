import { Injectable } from '@nestjs/common';
import type { ObjectToLine } from '@tallypole/shared/schemas/draws';
import type { Tx } from '../common/unit-of-work.ts';

interface OfDraw {
  firmId: string;
  jobId: string;
  drawId: string;
}

/** What homeowners say about a draw. */
@Injectable()
export class DecisionsRepository {
  async object(tx: Tx, { firmId, jobId, drawId }: OfDraw, objection: ObjectToLine, now: Date): Promise<void> {
    const { id, lineId, objectedCents, reason } = objection;
    await tx.rows(
      `insert into draw_objection (firm_id, job_id, id, draw_id, line_id, objected_cents, reason, by_person, at) values ($1, $2, $3, $4, $5, $6, $7, app.actor(), $8)`,
      [firmId, jobId, id, drawId, lineId, objectedCents, reason, now],
    );
  }

  async withdraw(tx: Tx, drawId: string, objectionId: string, now: Date): Promise<boolean> {
    const row = await tx.one('update draw_objection set withdrawn_at = $3 where draw_id = $1 and id = $2 and withdrawn_at is null returning id', [drawId, objectionId, now]);
    return row !== undefined;
  }

  /** A draw that came back is answered anew. */
  async withdrawAll(tx: Tx, drawId: string, now: Date): Promise<void> {
    await tx.rows('update draw_objection set withdrawn_at = $2 where draw_id = $1 and withdrawn_at is null', [drawId, now]);
  }

  async approve(tx: Tx, { firmId, jobId, drawId }: OfDraw, approval: { id: string; effectHash: string }, now: Date): Promise<void> {
    await tx.rows('insert into draw_approval (firm_id, job_id, id, draw_id, person_id, effect_hash, at) values ($1, $2, $3, $4, app.actor(), $5, $6)', [
      firmId,
      jobId,
      approval.id,
      drawId,
      approval.effectHash,
      now,
    ]);
  }

  /** Approvals of another effect don't hold any more. */
  async supersede(tx: Tx, drawId: string, effectHash: string | null, now: Date): Promise<void> {
    await tx.rows('update draw_approval set superseded_at = $3 where draw_id = $1 and superseded_at is null and effect_hash is distinct from $2', [drawId, effectHash, now]);
  }
}
