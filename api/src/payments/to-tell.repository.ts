import { Injectable } from '@nestjs/common';
import type { Role } from '@tallypole/shared/schemas/roles';
import type { Tx } from '../common/unit-of-work.ts';

export interface Told {
  personId: string;
  role: Role;
}

@Injectable()
export class ToTellRepository {
  /** The people on a job in these roles, each once. */
  async people(tx: Tx, jobId: string, roles: readonly Role[]): Promise<Told[]> {
    return await tx.rows<Told>('select person_id as "personId", role from app.to_tell($1, $2)', [jobId, roles]);
  }
}
