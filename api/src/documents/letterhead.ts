import type { Column, Content } from 'pdfmake/interfaces.js';

/** Who sends a paper: what the firm has entered about itself, and its logo where it has one. */
export interface Letterhead {
  name: string;
  street: string;
  city: string;
  state: string;
  zip: string;
  phone: string;
  license: string;
  logo: Buffer | null;
}

/** At the top of a paper's first page: the logo at the left, name, address, phone and license at the right, a thin rule below. */
export function letterheadOf({ name, street, city, state, zip, phone, license, logo }: Letterhead): Content {
  const lines = [street, city ? `${city}, ${state} ${zip}` : '', [phone, license ? `License ${license}` : ''].filter((part) => part !== '').join(' · ')].filter((line) => line !== '');
  const words: Column = {
    width: '*',
    alignment: logo ? 'right' : 'left',
    stack: [{ text: name, font: 'Lora', fontSize: 12, bold: true }, ...lines.map((text): Content => ({ text, style: 'small' }))],
  };
  const columns: Column[] = logo ? [{ width: 180, image: `data:image/png;base64,${logo.toString('base64')}`, fit: [150, 48] as [number, number] }, words] : [words];
  return {
    margin: [0, 0, 0, 18],
    stack: [{ columns, columnGap: 16 }, { canvas: [{ type: 'line', x1: 0, y1: 8, x2: 484, y2: 8, lineWidth: 0.6, lineColor: '#868c91' }] }],
  };
}
