import { createHmac } from 'node:crypto';
import { hotp, timeStep, type Hmac } from '../../otp/index.ts';
import type { Example } from './example.ts';

const DIGITS = '1234567890';
/** The seed of the RFCs: the ten digits over and over, as long as the hash. */
const seeded = (algorithm: string, length: number): Hmac => (message) => createHmac(algorithm, DIGITS.repeat(7).slice(0, length)).update(message).digest();
const hashes = [seeded('sha1', 20), seeded('sha256', 32), seeded('sha512', 64)];
const seconds = [59, 1_111_111_109, 1_111_111_111, 1_234_567_890, 2_000_000_000, 20_000_000_000];

export const codes: readonly Example[] = [
  {
    id: 'WE-G3',
    what: 'codes by time, 8 digits, by three hashes',
    source: 'RFC 6238, Appendix B',
    figures: [
      ...['94287082', '46119246', '90693936', '07081804', '68084774', '25091201', '14050471', '67062674', '99943326'],
      ...['89005924', '91819424', '93441116', '69279037', '90698825', '38618901', '65353130', '77737706', '47863826'],
    ],
    compute: () => seconds.flatMap((second) => hashes.map((hmac) => hotp(hmac, timeStep(second * 1000), 8))),
  },
  {
    id: 'WE-G4',
    what: 'codes by counter, 0 to 9',
    source: 'RFC 4226, Appendix D (from memory, recomputed by the list)',
    figures: ['755224', '287082', '359152', '969429', '338314', '254676', '287922', '162583', '399871', '520489'],
    compute: () => Array.from({ length: 10 }, (_, counter) => hotp(seeded('sha1', 20), counter)),
  },
];
