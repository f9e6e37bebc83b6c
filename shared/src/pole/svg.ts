import type { PolePicture } from './types.ts';

/** Colors by meaning, as CSS values: variables in a page, plain colors in a paper or a mail. */
export interface PoleColors {
  ink: string;
  graphite: string;
  pencil: string;
  sheet: string;
  treated: string;
  sawdust: string;
}

/** The light palette, for papers and mails. */
export const printColors: PoleColors = { ink: '#3b3a86', graphite: '#25282c', pencil: '#5d636a', sheet: '#fbfcfb', treated: '#37664a', sawdust: '#8f5d0c' };

export interface SvgOptions {
  rodWidth: number;
  labels: boolean;
  colors: PoleColors;
  font: string;
}

const LEFT = 34;
const EDGE = 8;
const LABEL_WIDTH = 150;
const escape = (text: string) => text.replace(/[&<>"']/g, (c) => `&#${c.charCodeAt(0)};`);
const n = (value: number) => String(Math.round(value * 100) / 100);

/** The rod as a picture of its own, for papers and mails. The portal draws the same picture from the same data. */
export function poleSvg(picture: PolePicture, { rodWidth, labels, colors, font }: SvgOptions): string {
  const width = LEFT + rodWidth + (labels ? LABEL_WIDTH : EDGE);
  const rect = (x: number, y: number, w: number, h: number, style: string) => `<rect x="${n(x)}" y="${n(y)}" width="${n(w)}" height="${n(h)}" ${style}/>`;
  const marks = picture.graduations.map(({ top, percent }) => {
    const long = percent % 50 === 0;
    const line = `<line x1="${LEFT - (long ? 12 : 6)}" x2="${LEFT}" y1="${n(top)}" y2="${n(top)}" stroke="${colors.pencil}"/>`;
    return long ? `${line}<text x="${LEFT - 15}" y="${n(Math.min(picture.height - 2, Math.max(10, top + 4)))}" text-anchor="end" font-size="11" fill="${colors.pencil}">${percent}</text>` : line;
  });
  const bands = picture.bands.map((band) => {
    const bottom = band.top + band.height;
    const fills = [
      rect(LEFT, band.top, rodWidth, band.height, `fill="${colors.sheet}"`),
      rect(LEFT, bottom - band.provenHeight, rodWidth, band.provenHeight, `fill="${colors.ink}" opacity="0.26"`),
      rect(LEFT, bottom - band.billedHeight, rodWidth, band.billedHeight, 'fill="url(#billed)"'),
      rect(LEFT + rodWidth - EDGE, bottom - band.paidHeight, EDGE, band.paidHeight, `fill="${colors.treated}"`),
      rect(LEFT, band.top, rodWidth, band.height, `fill="none" stroke="${colors.graphite}"`),
    ];
    const notches = band.notches.map(({ top, pending }) => `<path d="M${LEFT + rodWidth} ${n(top)} l-11 -6 v12 z" fill="${pending ? colors.sawdust : colors.graphite}"/>`);
    const middle = band.top + band.height / 2;
    const words = labels && band.showsLabel
      ? `<text x="${LEFT + rodWidth + 14}" y="${n(middle)}" font-size="13" fill="${colors.graphite}">${escape(band.name)}</text><text x="${LEFT + rodWidth + 14}" y="${n(middle + 15)}" font-size="11.5" fill="${colors.pencil}">${escape(band.caption)}</text>`
      : '';
    return [...fills, ...notches, words].join('');
  });
  const pointer = picture.pointerTop === null ? '' : `<path d="M${LEFT - 1} ${n(picture.pointerTop)} l-9 -5 v10 z" fill="${colors.graphite}"/>`;
  const hatch = `<defs><pattern id="billed" width="6" height="6" patternUnits="userSpaceOnUse" patternTransform="rotate(45)"><line x1="0" y1="0" x2="0" y2="6" stroke="${colors.ink}" stroke-width="1.6"/></pattern></defs>`;
  return `<svg xmlns="http://www.w3.org/2000/svg" width="${width}" height="${n(picture.height + 2)}" viewBox="0 -1 ${width} ${n(picture.height + 2)}" font-family="${escape(font)}">${hatch}${marks.join('')}${bands.join('')}${pointer}</svg>`;
}
