import { distanceM } from '../../evidence/index.ts';
import { sha256 } from '../../record/index.ts';
import type { Example } from './example.ts';

/** How far a sphere's distance may lie from the ellipsoid's. */
const SPHERE = 0.005;
/** The published distance where ours lies that near, else ours. */
const near = (published: string, meters: number): string => (Math.abs(meters / Number(published) - 1) <= SPHERE ? published : meters.toFixed(3));

export const proof: readonly Example[] = [
  {
    // on an ellipsoid there, on the mean sphere here: enough for a radius of 75 m
    id: 'WE-H1',
    what: 'Flinders Peak to Buninyong, within half a percent',
    source: 'Geoscience Australia, GDA technical manual, as in chrisveness/geodesy tests',
    figures: ['54972.271'],
    compute: () => [near('54972.271', distanceM({ latitude: -37.95103341666667, longitude: 144.42486788888888 }, { latitude: -37.65282113888889, longitude: 143.92649552777777 }))],
  },
  {
    id: 'WE-H3',
    what: 'Land\'s End to John o\' Groats, within half a percent',
    source: 'chrisveness/geodesy tests (Vincenty)',
    figures: ['969954.166'],
    compute: () => [near('969954.166', distanceM({ latitude: 50.06632, longitude: -5.71475 }, { latitude: 58.64402, longitude: -3.07009 }))],
  },
  {
    id: 'WE-G1',
    what: 'SHA-256 of a text',
    source: 'NIST FIPS 180-4 example values (from memory, recomputed by the list)',
    figures: ['e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855', 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad', '248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1', 'cdc76e5c9914fb9281a1c7e284d73e67f1809a48a497200e046d39ccc7112cd0'],
    compute: () => Promise.all(['', 'abc', 'abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq', 'a'.repeat(1_000_000)].map(sha256)),
  },
];
