import sharp from 'sharp';
import { LOGO_BOX } from '@tallypole/shared/schemas/firms';
import type { UnitOfWork } from '../common/unit-of-work.ts';

const MOST_PIXELS = 16_000_000;

/** Worker: makes the logo for papers from what was sent, without any of its metadata, and forgets what was sent. Run again it does nothing more. */
export async function renderLogo(work: UnitOfWork, firmId: string): Promise<void> {
  const sent = await work.writeAsFirm(firmId, (tx) => tx.one<{ sent: Buffer; version: number }>(`select sent, version from firm_logo where firm_id = $1 and state = 'stored'`, [firmId]));
  if (!sent) return;
  const content = await rendered(sent.sent).catch(() => null);
  const [state, trouble] = content ? ['ready', null] : ['unreadable', `The picture is damaged, or has more than ${MOST_PIXELS / 1_000_000} million pixels.`];
  // another one that was sent meanwhile has a task of its own
  await work.writeAsFirm(firmId, (tx) => tx.rows('update firm_logo set state = $3, content = $4, trouble = $5, sent = null where firm_id = $1 and version = $2', [firmId, sent.version, state, content, trouble]));
}

const rendered = (picture: Buffer): Promise<Buffer> =>
  sharp(picture, { limitInputPixels: MOST_PIXELS, failOn: 'error' })
    .autoOrient()
    .resize(LOGO_BOX.width, LOGO_BOX.height, { fit: 'inside', withoutEnlargement: true })
    .flatten({ background: '#ffffff' })
    .png({ compressionLevel: 9 })
    .toBuffer();
