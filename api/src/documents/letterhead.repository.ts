import { Injectable } from '@nestjs/common';
import type { Tx } from '../common/unit-of-work.ts';
import type { Letterhead } from './letterhead.ts';

@Injectable()
export class LetterheadRepository {
  async find(tx: Tx, firmId: string): Promise<Letterhead | undefined> {
    return await tx.one<Letterhead>(
      `select f.name, f.street, f.city, f.state, f.zip, f.phone, f.license, l.content as logo from firm f left join firm_logo l on l.firm_id = f.id where f.id = $1`,
      [firmId],
    );
  }
}
