import sharp from 'sharp';

export type Scene = 'foundation' | 'floor' | 'walls';

export interface Shot {
  scene: Scene;
  /** Another number, another picture of the same scene. */
  variant: number;
  takenAt: Date;
  latitude: number;
  longitude: number;
}

const WIDTH = 1600;
const HEIGHT = 1200;

/** A drawn picture of a site as a phone would save it: JPEG with time and place. */
export async function drawnPhoto(shot: Shot): Promise<Buffer> {
  const taken = shot.takenAt.toISOString().slice(0, 19).replaceAll('-', ':').replace('T', ' ');
  const gps = { GPSLatitudeRef: shot.latitude < 0 ? 'S' : 'N', GPSLatitude: degrees(shot.latitude), GPSLongitudeRef: shot.longitude < 0 ? 'W' : 'E', GPSLongitude: degrees(shot.longitude), GPSHPositioningError: '800/100' };
  const picture = sharp(Buffer.from(svg(shot.scene, shot.variant))).jpeg({ quality: 88 });
  return await picture.withExif({ IFD0: { Make: 'Tallypole', Model: 'Drawn by hand' }, IFD2: { DateTimeOriginal: taken, OffsetTimeOriginal: '+00:00' }, IFD3: gps }).toBuffer();
}

function degrees(value: number): string {
  const seconds = Math.round(Math.abs(value) * 360_000);
  return `${Math.floor(seconds / 360_000)}/1 ${Math.floor((seconds % 360_000) / 6_000)}/1 ${seconds % 6_000}/100`;
}

const bars = (count: number, draw: (i: number) => string) => Array.from({ length: count }, (_, i) => draw(i)).join('');

function svg(scene: Scene, variant: number): string {
  const sky = ['#c9d6de', '#d6dde0', '#bfd0da'][variant % 3] ?? '#c9d6de';
  const horizon = 560 + variant * 25;
  const ground = `<rect y="${horizon}" width="${WIDTH}" height="${HEIGHT - horizon}" fill="#9a8a6c"/>`;
  const hill = `<path d="M0 ${horizon} Q ${400 + variant * 130} ${horizon - 160} 900 ${horizon} T 1600 ${horizon - 30} V ${horizon + 40} H 0 z" fill="#8fa08a"/>`;
  return `<svg xmlns="http://www.w3.org/2000/svg" width="${WIDTH}" height="${HEIGHT}"><rect width="${WIDTH}" height="${HEIGHT}" fill="${sky}"/>${hill}${ground}${drawing[scene](horizon, variant)}</svg>`;
}

const drawing: Readonly<Record<Scene, (horizon: number, variant: number) => string>> = {
  foundation: (h, v) => `<path d="M${180 + v * 40} ${h + 120} L${1400 - v * 50} ${h + 70} L1540 ${h + 330} L${60 + v * 20} ${h + 420} z" fill="#b9b6ae"/><path d="M${290 + v * 40} ${h + 160} L${1310 - v * 50} ${h + 120} L1390 ${h + 290} L${210 + v * 20} ${h + 360} z" fill="#7d6d55"/>${bars(9, (i) => `<rect x="${250 + i * 130}" y="${h + 100 + (i % 3) * 8}" width="10" height="26" fill="#5b5f63"/>`)}`,
  floor: (h, v) => `<path d="M60 ${h + 60} L1540 ${h + 40} L1600 ${h + 520} L0 ${h + 560} z" fill="#6d5a40"/>${bars(16, (i) => `<path d="M${90 + i * 92 + v * 8} ${h + 52} L${120 + i * 92 + v * 8} ${h + 52} L${96 + i * 104} ${h + 540} L${50 + i * 104} ${h + 540} z" fill="${i % 2 ? '#d9bd84' : '#cfae70'}"/>`)}<rect x="40" y="${h + 30}" width="1520" height="34" fill="#c39c5b"/>`,
  walls: (h, v) => `<rect x="70" y="${h + 230}" width="1460" height="120" fill="#d0b681"/>${bars(19, (i) => `<rect x="${90 + i * 76}" y="${h - 330}" width="26" height="570" fill="${i % 3 ? '#dcc08a' : '#d2b378'}"/>`)}<rect x="70" y="${h - 350}" width="1460" height="30" fill="#c79f5e"/><rect x="${420 + v * 150}" y="${h - 190}" width="300" height="250" fill="#c9d6de" stroke="#b48f52" stroke-width="18"/>`,
};
