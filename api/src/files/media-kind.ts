import { fileTypeFromBuffer } from 'file-type/node';

/** What is accepted, and the endings that agree with it. */
const ENDINGS: Readonly<Record<string, readonly string[]>> = {
  'application/pdf': ['pdf'],
  'image/jpeg': ['jpg', 'jpeg'],
  'image/png': ['png'],
  'image/webp': ['webp'],
  'image/heic': ['heic', 'heif'],
  'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet': ['xlsx'],
  'application/vnd.openxmlformats-officedocument.wordprocessingml.document': ['docx'],
};
const PHOTO_TYPES = ['image/jpeg', 'image/png', 'image/webp', 'image/heic'];
const HEIC_BRANDS = ['image/heif', 'image/heic-sequence', 'image/heif-sequence'];

/** How much of a file's beginning the sniffer is shown. */
export const HEAD_BYTES = 65_536;

/** The media type that a file's first bytes show, or undefined where none is known. */
export async function sniff(head: Uint8Array): Promise<string | undefined> {
  // the beginning of a larger archive may end within an entry: then nothing is known
  const found = await fileTypeFromBuffer(head).catch(() => undefined);
  return found && HEIC_BRANDS.includes(found.mime) ? 'image/heic' : found?.mime;
}

/** Whether a document of this type and name is accepted: a known type whose ending agrees. */
export const isAcceptedFile = (mediaType: string | undefined, name: string): mediaType is string =>
  mediaType !== undefined && (ENDINGS[mediaType]?.includes(name.split('.').at(-1)?.toLowerCase() ?? '') ?? false);

/** Whether a photo of this type is accepted; phones name their pictures as they like. */
export const isAcceptedPhoto = (mediaType: string | undefined): mediaType is string => mediaType !== undefined && PHOTO_TYPES.includes(mediaType);
