import { createRequire } from 'node:module';
import { PDFDocument } from 'pdf-lib';
import pdfmake from 'pdfmake';
import type { Content, TDocumentDefinitions } from 'pdfmake/interfaces.js';
import { letterheadOf, type Letterhead } from './letterhead.ts';

const resolve = (file: string) => createRequire(import.meta.url).resolve(file);
// whole fonts, so that every name prints; the web fonts are cut by script
const inter = (file: string) => resolve(`@expo-google-fonts/inter/${file}`);
const lora = (file: string) => resolve(`@expo-google-fonts/lora/${file}`);
const FONTS = {
  Inter: { normal: inter('400Regular/Inter_400Regular.ttf'), bold: inter('600SemiBold/Inter_600SemiBold.ttf'), italics: inter('400Regular_Italic/Inter_400Regular_Italic.ttf'), bolditalics: inter('600SemiBold/Inter_600SemiBold.ttf') },
  Lora: { normal: lora('400Regular/Lora_400Regular.ttf'), bold: lora('600SemiBold/Lora_600SemiBold.ttf'), italics: lora('400Regular_Italic/Lora_400Regular_Italic.ttf'), bolditalics: lora('600SemiBold_Italic/Lora_600SemiBold_Italic.ttf') },
};
const fontFiles = new Set(Object.values(FONTS).flatMap((font) => Object.values(font)));

pdfmake.addFonts(FONTS);
pdfmake.setUrlAccessPolicy(() => false);
pdfmake.setLocalAccessPolicy((file) => fontFiles.has(file));

export interface Paper {
  title: string;
  /** Who sends it, at the top of its first page. */
  letterhead?: Letterhead | undefined;
  /** Printed at the top of every page: firm, job. */
  head: string;
  /** Printed at the foot beside the page number. */
  foot: string;
  content: Content[];
}

const GRAPHITE = '#25282c';
const PENCIL = '#5d636a';

/** A paper on letter as PDF, in our type; nothing is fetched. */
export async function renderPaper({ title, letterhead, head, foot, content }: Paper): Promise<Buffer> {
  const definition: TDocumentDefinitions = {
    pageSize: 'LETTER',
    pageMargins: [64, 74, 64, 64],
    info: { title, creator: 'Tallypole', producer: 'Tallypole' },
    defaultStyle: { font: 'Inter', fontSize: 10, lineHeight: 1.3, color: GRAPHITE },
    styles: {
      title: { font: 'Lora', fontSize: 21, bold: true, margin: [0, 0, 0, 6] },
      heading: { font: 'Lora', fontSize: 13, bold: true, margin: [0, 16, 0, 6] },
      sum: { font: 'Lora', fontSize: 13, bold: true },
      quiet: { color: PENCIL },
      small: { fontSize: 8.5, color: PENCIL },
    },
    header: { text: head, style: 'small', margin: [64, 34, 64, 0] },
    footer: (page, pages) => ({ columns: [{ text: foot }, { text: `Page ${page} of ${pages}`, alignment: 'right', width: 80 }], style: 'small', margin: [64, 20, 64, 0] }),
    content: letterhead ? [letterheadOf(letterhead), ...content] : content,
  };
  return await pdfmake.createPdf(definition).getBuffer();
}

/** The pages of one paper followed by those of another; the first one's pages are taken over as they are. */
export async function joinPapers(first: Uint8Array, second: Uint8Array, title: string): Promise<Buffer> {
  const joined = await PDFDocument.create();
  joined.setTitle(title);
  for (const bytes of [first, second]) {
    const part = await PDFDocument.load(bytes);
    for (const page of await joined.copyPages(part, part.getPageIndices())) joined.addPage(page);
  }
  return Buffer.from(await joined.save());
}
