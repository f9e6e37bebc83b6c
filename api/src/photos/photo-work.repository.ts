import type { Earlier } from '@tallypole/shared/evidence';
import type { PhotoFinding } from '@tallypole/shared/schemas/photos';
import type { Tx } from '../common/unit-of-work.ts';
import type { StoredSize } from './photos.repository.ts';
import type { PictureOrigin } from './read-exif.ts';

export interface PhotoToProcess {
  jobId: string;
  state: 'stored' | 'ready' | 'unreadable';
  storageKey: string;
  mediaType: string;
  timeZone: string;
}

export interface ReadPicture extends PictureOrigin {
  width: number;
  height: number;
  phash: string;
  sizes: StoredSize[];
}

export async function photoToProcess(tx: Tx, photoId: string): Promise<PhotoToProcess | undefined> {
  return await tx.one<PhotoToProcess>(
    `select p.job_id as "jobId", p.state, f.storage_key as "storageKey", f.media_type as "mediaType", j.time_zone as "timeZone"
     from photo p join file f on f.id = p.file_id join job j on j.id = p.job_id where p.id = $1`,
    [photoId],
  );
}

/** False where somebody else was first. */
export async function markReady(tx: Tx, photoId: string, picture: ReadPicture): Promise<boolean> {
  const { takenAt, latitude, longitude, accuracyM, width, height, phash, sizes } = picture;
  const row = await tx.one(
    `update photo set state = 'ready', taken_at = $2, latitude = $3, longitude = $4, accuracy_m = $5, width = $6, height = $7, phash = $8, sizes = $9
     where id = $1 and state = 'stored' returning id`,
    [photoId, takenAt, latitude, longitude, accuracyM, width, height, phash, JSON.stringify(sizes)],
  );
  return row !== undefined;
}

export async function markUnreadable(tx: Tx, photoId: string, trouble: string): Promise<void> {
  await tx.rows(`update photo set state = 'unreadable', trouble = $2 where id = $1 and state = 'stored'`, [photoId, trouble]);
}

/** A photo with what it is weighed against. */
export interface PhotoToWeigh {
  id: string;
  place: { latitude: number; longitude: number; accuracyM: number | null } | null;
  site: { latitude: number; longitude: number; radiusM: number } | null;
  takenOn: string | null;
  beganOn: string | null;
  claimedOn: string | null;
  phash: string;
  earlier: Earlier | null;
}

/** The ready photos of a job. Pictures of one milestone may be alike: a series of one spot is meant. */
export async function photosToWeigh(tx: Tx, jobId: string): Promise<PhotoToWeigh[]> {
  return await tx.rows<PhotoToWeigh>(
    `select p.id, p.phash,
       case when p.latitude is not null then json_build_object('latitude', p.latitude, 'longitude', p.longitude, 'accuracyM', p.accuracy_m) end as place,
       case when j.latitude is not null then json_build_object('latitude', j.latitude, 'longitude', j.longitude, 'radiusM', j.site_radius_m) end as site,
       to_char(p.taken_at at time zone j.time_zone, 'YYYY-MM-DD') as "takenOn",
       to_char(m.started_at at time zone j.time_zone, 'YYYY-MM-DD') as "beganOn",
       to_char(m.claimed_at at time zone j.time_zone, 'YYYY-MM-DD') as "claimedOn",
       (select json_build_object('bits', bit_count(('x' || q.phash)::bit(64) # ('x' || p.phash)::bit(64)),
            'sameJob', case when q.job_id = p.job_id then json_build_object('milestone', n.name, 'addedOn', to_char(q.created_at at time zone j.time_zone, 'YYYY-MM-DD')) end)
          from photo q join milestone n on n.id = q.milestone_id
          where q.firm_id = p.firm_id and q.milestone_id <> p.milestone_id and q.phash is not null and (q.created_at, q.id) < (p.created_at, p.id)
          order by bit_count(('x' || q.phash)::bit(64) # ('x' || p.phash)::bit(64)), q.created_at limit 1) as earlier
     from photo p join milestone m on m.id = p.milestone_id join job j on j.id = p.job_id
     where p.job_id = $1 and p.state = 'ready'`,
    [jobId],
  );
}

export async function setFindings(tx: Tx, findings: readonly { id: string; findings: readonly PhotoFinding[] }[]): Promise<void> {
  await tx.rows(
    `update photo p set findings = f.findings from json_to_recordset($1::json) as f (id uuid, findings jsonb) where p.id = f.id and p.findings is distinct from f.findings`,
    [JSON.stringify(findings)],
  );
}
