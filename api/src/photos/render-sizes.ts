import sharp, { type Sharp } from 'sharp';
import { MOST_PHOTO_PIXELS, photoSizes, type PhotoSize } from '@tallypole/shared/schemas/photos';
import { HASH_SIDE, perceptualHash } from './perceptual-hash.ts';

interface RenderedSize {
  size: PhotoSize;
  content: Buffer;
  width: number;
  height: number;
}

export interface Rendered {
  width: number;
  height: number;
  phash: string;
  sizes: RenderedSize[];
}

/** A picture that cannot be shown, and why, in a sentence for who took it. */
export class UnreadablePicture extends Error {
  override readonly name = 'UnreadablePicture';
}

// the other jobs of the worker and the web process share these cores
sharp.concurrency(1);
sharp.cache(false);

const QUALITY = { small: 74, medium: 78, large: 82 } as const;

/** Decodes a picture, upright, and encodes it anew in three sizes without any metadata. Throws UnreadablePicture. */
export async function renderSizes(picture: Buffer, mediaType: string): Promise<Rendered> {
  const options = { limitInputPixels: MOST_PHOTO_PIXELS, failOn: 'error' } as const;
  try {
    const { width, height } = (await sharp(picture, { ...options, limitInputPixels: false }).metadata()).autoOrient;
    if (width * height > MOST_PHOTO_PIXELS) throw new UnreadablePicture(`The picture has more than ${MOST_PHOTO_PIXELS / 1_000_000} million pixels. Its original is kept; take it again in a smaller size.`);
    const large = await encode(sharp(picture, options).autoOrient(), 'large');
    const medium = await encode(sharp(large.content), 'medium');
    const small = await encode(sharp(medium.content), 'small');
    const gray = await sharp(small.content).greyscale().resize(HASH_SIDE, HASH_SIDE, { fit: 'fill' }).raw().toBuffer();
    return { width, height, phash: perceptualHash(gray), sizes: [small, medium, large] };
  } catch (error) {
    if (error instanceof UnreadablePicture) throw error;
    throw new UnreadablePicture(
      mediaType === 'image/heic'
        ? 'Pictures in the HEIC format cannot be shown here. The original is kept; set the phone’s camera to JPEG (“Most Compatible”) and take it again.'
        : 'The picture is damaged or incomplete. What arrived is kept; take it again.',
      { cause: error },
    );
  }
}

async function encode(picture: Sharp, size: PhotoSize): Promise<RenderedSize> {
  const side = photoSizes[size];
  const { data, info } = await picture
    .resize(side, side, { fit: 'inside', withoutEnlargement: true })
    .flatten({ background: '#ffffff' })
    .jpeg({ quality: QUALITY[size], progressive: true })
    .toBuffer({ resolveWithObject: true });
  return { size, content: data, width: info.width, height: info.height };
}
