import sharp from 'sharp';

export interface Picture {
  /** What is on it: another number, another picture. */
  scene?: number;
  width?: number;
  height?: number;
  /** The camera's clock, YYYY:MM:DD HH:MM:SS, and its offset. */
  taken?: string;
  offset?: string;
  at?: { latitude: number; longitude: number; accuracyM?: number };
  /** EXIF orientation, 1 to 8. */
  orientation?: number;
}

/** A JPEG as a phone makes it: drawn, with the time and place in its metadata. */
export async function jpeg(picture: Picture = {}): Promise<Buffer> {
  const { scene = 1, width = 1600, height = 1200, taken, offset, at, orientation } = picture;
  const gps = at
    ? {
        GPSLatitudeRef: at.latitude < 0 ? 'S' : 'N', GPSLatitude: degrees(at.latitude), GPSLongitudeRef: at.longitude < 0 ? 'W' : 'E', GPSLongitude: degrees(at.longitude),
        ...(at.accuracyM === undefined ? {} : { GPSHPositioningError: `${Math.round(at.accuracyM * 100)}/100` }),
      }
    : {};
  const clock = { ...(taken ? { DateTimeOriginal: taken } : {}), ...(offset ? { OffsetTimeOriginal: offset } : {}) };
  const drawn = sharp(Buffer.from(drawing(scene, width, height))).jpeg({ quality: 85 });
  return await drawn.withExif({ IFD0: { Make: 'Larkspur', Model: 'Pocket 3' }, IFD2: clock, IFD3: gps }).withMetadata(orientation === undefined ? {} : { orientation }).toBuffer();
}

/** Degrees, minutes and hundredths of seconds as EXIF writes them. */
function degrees(value: number): string {
  const seconds = Math.round(Math.abs(value) * 360_000);
  return `${Math.floor(seconds / 360_000)}/1 ${Math.floor((seconds % 360_000) / 6_000)}/1 ${seconds % 6_000}/100`;
}

/** A framed wall of studs, each scene with other spacings. */
function drawing(scene: number, width: number, height: number): string {
  let seed = scene * 7_919;
  const next = () => (seed = (seed * 16_807) % 2_147_483_647) / 2_147_483_647;
  const studs = Array.from({ length: 14 }, () => {
    const [x, y, w, h] = [next() * width, next() * height * 0.6, 20 + next() * width * 0.16, height * (0.15 + next() * 0.5)];
    return `<rect x="${x.toFixed(0)}" y="${y.toFixed(0)}" width="${w.toFixed(0)}" height="${h.toFixed(0)}" fill="hsl(${(25 + next() * 30).toFixed(0)} 45% ${(25 + next() * 55).toFixed(0)}%)"/>`;
  });
  return `<svg xmlns="http://www.w3.org/2000/svg" width="${width}" height="${height}"><rect width="100%" height="100%" fill="#c9d6df"/><rect y="75%" width="100%" height="25%" fill="#8d7b64"/>${studs.join('')}</svg>`;
}
