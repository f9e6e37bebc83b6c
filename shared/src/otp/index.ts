export { base32 } from './base32.ts';
export { enrolmentUri } from './enrolment.ts';
export { hotp, type Hmac } from './hotp.ts';
export { stepOfCode, timeStep } from './totp.ts';
