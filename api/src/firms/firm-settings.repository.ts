import { Injectable } from '@nestjs/common';
import type { FirmSettings, FirmSettingsInput, PeopleWhoLeft } from '@tallypole/shared/schemas/firms';
import type { Tx } from '../common/unit-of-work.ts';

@Injectable()
export class FirmSettingsRepository {
  async settings(tx: Tx, firmId: string): Promise<FirmSettings | undefined> {
    return (await tx.one<{ settings: FirmSettings }>(SETTINGS, [firmId]))?.settings;
  }

  /** False where somebody else has set them in the meantime. */
  async set(tx: Tx, firmId: string, input: FirmSettingsInput): Promise<boolean> {
    const { version, name, street, city, state, zip, phone, license, siteSeesPrices } = input;
    const row = await tx.one<{ version: number | null }>('select app.set_firm_settings($1, $2, $3, $4, $5, $6, $7, $8, $9, $10) as version', [
      firmId, version, name, street, city, state, zip, phone, license, siteSeesPrices,
    ]);
    return row?.version != null;
  }

  async keepLogo(tx: Tx, firmId: string, sent: Buffer, now: Date): Promise<void> {
    await tx.rows(
      `insert into firm_logo (firm_id, state, sent, version, updated_at) values ($1, 'stored', $2, 1, $3)
       on conflict (firm_id) do update set state = 'stored', sent = excluded.sent, content = null, trouble = null, version = firm_logo.version + 1, updated_at = excluded.updated_at`,
      [firmId, sent, now],
    );
  }

  async removeLogo(tx: Tx, firmId: string): Promise<void> {
    await tx.rows('delete from firm_logo where firm_id = $1', [firmId]);
  }

  async logo(tx: Tx, firmId: string): Promise<Buffer | undefined> {
    return (await tx.one<{ content: Buffer | null }>('select content from firm_logo where firm_id = $1', [firmId]))?.content ?? undefined;
  }

  /** One row for each person, with every place that they left. */
  async whoLeft(tx: Tx, firmId: string): Promise<PeopleWhoLeft> {
    const row = await tx.one<{ items: PeopleWhoLeft['items'] }>(WHO_LEFT, [firmId]);
    return { items: row?.items ?? [] };
  }

  async erase(tx: Tx, firmId: string, personId: string, now: Date): Promise<'done' | 'unknown' | 'elsewhere'> {
    return (await tx.one<{ outcome: 'done' | 'unknown' | 'elsewhere' }>('select app.erase_person($1, $2, $3) as outcome', [firmId, personId, now]))?.outcome ?? 'unknown';
  }

  async recordWhereTheyWere(tx: Tx, firmId: string, personId: string, text: string): Promise<void> {
    await tx.rows('select app.record_where_they_were($1, $2, $3)', [firmId, personId, text]);
  }
}

const SETTINGS = /* sql */ `
  select json_build_object('id', f.id, 'name', f.name, 'street', f.street, 'city', f.city, 'state', f.state, 'zip', f.zip, 'phone', f.phone, 'license', f.license,
    'siteSeesPrices', f.site_sees_prices, 'version', f.version,
    'logo', json_build_object('state', coalesce(l.state, 'none'), 'trouble', l.trouble, 'version', coalesce(l.version, 0))) as settings
  from firm f left join firm_logo l on l.firm_id = f.id where f.id = $1`;

const WHO_LEFT = /* sql */ `
  select coalesce(json_agg(x.item order by x.ended_at desc), '[]') as items from (
    select max(ended_at) as ended_at, json_build_object('personId', person_id, 'name', name, 'places', json_agg(distinct jsonb_build_object('role', role, 'place', place)),
      'endedAt', to_char(max(ended_at) at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"'), 'elsewhere', bool_or(elsewhere), 'erased', bool_or(erased)) as item
    from app.people_who_left($1) group by person_id, name order by 1 desc limit 200) x`;
