import { enrolmentUri } from '@tallypole/shared/otp';
import { render, screen } from '@testing-library/react';
import jsqr from 'jsqr';
import { describe, expect, it } from 'vitest';
import { QrPicture } from './qr-picture.tsx';

const SCALE = 4;
// jsqr is CommonJS: what it exports stands one level deeper here than its types say
const decode = (typeof jsqr === 'function' ? jsqr : (jsqr as { default: typeof jsqr }).default);

/** The picture as a camera would see it. */
function seen(svg: Element): string | undefined {
  const side = Number(svg.getAttribute('viewBox')?.split(' ')[2]) * SCALE;
  const pixels = new Uint8ClampedArray(side * side * 4).fill(255);
  for (const [, x, y] of (svg.querySelector('path')?.getAttribute('d') ?? '').matchAll(/M(\d+) (\d+)h1v1h-1z/g)) {
    for (let dy = 0; dy < SCALE; dy += 1) for (let dx = 0; dx < SCALE; dx += 1) pixels.fill(0, ((Number(y) * SCALE + dy) * side + Number(x) * SCALE + dx) * 4, ((Number(y) * SCALE + dy) * side + Number(x) * SCALE + dx) * 4 + 3);
  }
  return decode(pixels, side, side)?.data;
}

describe('the picture for an authenticator', () => {
  it.each(['ann@moss.example', `${'long.'.repeat(40)}@very-long-domain-of-a-builder.example`])('is read as the key of %s', (email) => {
    const uri = enrolmentUri('Tallypole (portal.example)', email, new Uint8Array(20).map((_, i) => i * 11));
    render(<QrPicture text={uri} label="The key" />);
    expect(seen(screen.getByRole('img', { name: 'The key' }))).toBe(uri);
  });
});
