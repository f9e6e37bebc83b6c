import { Injectable } from '@nestjs/common';
import type { Photo, PhotoSize, Site, SiteLocation } from '@tallypole/shared/schemas/photos';
import type { Tx } from '../common/unit-of-work.ts';

export interface NewPhoto {
  firmId: string;
  jobId: string;
  id: string;
  milestoneId: string;
  note: string;
  createdAt: Date;
}

export interface StoredSize {
  size: PhotoSize;
  key: string;
  width: number;
  height: number;
  bytes: number;
}

@Injectable()
export class PhotosRepository {
  async hasMilestone(tx: Tx, jobId: string, milestoneId: string): Promise<boolean> {
    return (await tx.one('select id from milestone where job_id = $1 and id = $2', [jobId, milestoneId])) !== undefined;
  }

  /** The photo of a file that was kept under the same id. */
  async add(tx: Tx, photo: NewPhoto): Promise<void> {
    const { firmId, jobId, id, milestoneId, note, createdAt } = photo;
    await tx.rows(
      `insert into photo (firm_id, job_id, id, file_id, milestone_id, note, created_by, created_at) values ($1, $2, $3, $3, $4, $5, app.actor(), $6)`,
      [firmId, jobId, id, milestoneId, note, createdAt],
    );
  }

  async find(tx: Tx, jobId: string, photoId: string, withPlace: boolean): Promise<Photo | undefined> {
    const row = await tx.one<{ photo: Photo }>(`select ${PHOTO} as photo from photo p join file f on f.id = p.file_id where p.job_id = $1 and p.id = $3`, [jobId, withPlace, photoId]);
    return row?.photo;
  }

  /** Newest first, of the whole job or of one milestone. */
  async list(tx: Tx, jobId: string, withPlace: boolean, page: { milestoneId: string | null; limit: number; after: { createdAt: string; id: string } | null }): Promise<Photo[]> {
    const rows = await tx.rows<{ photo: Photo }>(
      `select ${PHOTO} as photo from photo p join file f on f.id = p.file_id
       where p.job_id = $1 and ($3::uuid is null or p.milestone_id = $3::uuid)
         and ($5::timestamptz is null or (p.created_at, p.id) < ($5::timestamptz, $6::uuid))
       order by p.created_at desc, p.id desc limit $4`,
      [jobId, withPlace, page.milestoneId, page.limit, page.after?.createdAt ?? null, page.after?.id ?? null],
    );
    return rows.map(({ photo }) => photo);
  }

  async size(tx: Tx, jobId: string, photoId: string, size: string): Promise<StoredSize | undefined> {
    const row = await tx.one<{ sizes: StoredSize[] }>('select sizes from photo where job_id = $1 and id = $2', [jobId, photoId]);
    return row?.sizes.find((stored) => stored.size === size);
  }

  async site(tx: Tx, jobId: string): Promise<Site> {
    const row = await tx.one<{ location: SiteLocation | null }>(
      `select case when latitude is not null then json_build_object('latitude', latitude, 'longitude', longitude, 'radiusM', site_radius_m) end as location from job where id = $1`,
      [jobId],
    );
    return { location: row?.location ?? null };
  }

  /** Moves the site; returns its firm. */
  async locate(tx: Tx, jobId: string, { latitude, longitude, radiusM }: SiteLocation): Promise<string | undefined> {
    const row = await tx.one<{ firm_id: string }>('update job set latitude = $2, longitude = $3, site_radius_m = $4, version = version + 1 where id = $1 returning firm_id', [jobId, latitude, longitude, radiusM]);
    return row?.firm_id;
  }
}

const instant = (column: string) => `to_char(${column} at time zone 'utc', 'YYYY-MM-DD"T"HH24:MI:SS.MS"Z"')`;

const PHOTO = /* sql */ `json_build_object('id', p.id, 'milestoneId', p.milestone_id, 'fileId', p.file_id, 'state', p.state, 'trouble', p.trouble, 'note', p.note,
  'takenAt', ${instant('p.taken_at')},
  'place', case when $2 and p.latitude is not null then json_build_object('latitude', p.latitude, 'longitude', p.longitude, 'accuracyM', p.accuracy_m) end,
  'width', p.width, 'height', p.height, 'bytes', f.bytes, 'sha256', f.sha256, 'findings', p.findings,
  'addedBy', (select json_build_object('id', q.id, 'name', coalesce(q.name, q.email)) from person q where q.id = p.created_by),
  'addedAt', ${instant('p.created_at')})`;
