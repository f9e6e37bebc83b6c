import { PDFArray, PDFDict, PDFDocument, PDFName, PDFRawStream, PDFRef, decodePDFRawStream, type PDFObject } from 'pdf-lib';

/** The letters of a page of one of our papers without their spaces (kerning breaks words up), read by each font's own table, and how many pictures stand on it. */
export async function readPage(pdf: Buffer, index = 0): Promise<{ text: string; pictures: number }> {
  const document = await PDFDocument.load(pdf);
  const page = document.getPage(index);
  const look = (object: PDFObject | undefined) => (object instanceof PDFRef ? document.context.lookup(object) : object);
  const text = (object: PDFObject | undefined) => {
    const stream = look(object);
    return stream instanceof PDFRawStream ? Buffer.from(decodePDFRawStream(stream).decode()).toString('latin1') : '';
  };
  const fonts = new Map<string, Map<string, string>>();
  const fontsOf = look(page.node.Resources()?.get(PDFName.of('Font')));
  if (fontsOf instanceof PDFDict) {
    for (const [name, value] of fontsOf.entries()) {
      const font = look(value);
      if (font instanceof PDFDict) fonts.set(name.asString(), tableOf(text(font.get(PDFName.of('ToUnicode')))));
    }
  }
  const objects = look(page.node.Resources()?.get(PDFName.of('XObject')));
  const contents = look(page.node.Contents());
  const parts = contents instanceof PDFArray ? contents.asArray() : [page.node.get(PDFName.of('Contents'))];
  return { text: wordsOf(parts.map(text).join('\n'), fonts), pictures: objects instanceof PDFDict ? objects.keys().length : 0 };
}

/** Glyph to letters: <0000> <00ff> [<0048> <0065> …]. */
function tableOf(map: string): Map<string, string> {
  const table = new Map<string, string>();
  for (const [, from = '0', list = ''] of map.matchAll(/<([0-9a-f]+)>\s*<[0-9a-f]+>\s*\[([^\]]*)\]/gi)) {
    [...list.matchAll(/<([0-9a-f\s]*)>/gi)].forEach(([, hex = ''], i) => {
      const letters = (hex.replace(/\s/g, '').match(/.{4}/g) ?? []).map((unit) => String.fromCharCode(Number.parseInt(unit, 16))).join('');
      table.set((Number.parseInt(from, 16) + i).toString(16).padStart(4, '0'), letters);
    });
  }
  return table;
}

function wordsOf(content: string, fonts: ReadonlyMap<string, Map<string, string>>): string {
  let font = new Map<string, string>();
  const words: string[] = [];
  for (const [, name, shown] of content.matchAll(/(\/F\d+)\s+[\d.]+\s+Tf|\[([^\]]*)\]\s*TJ/g)) {
    if (name !== undefined) font = fonts.get(name) ?? new Map();
    else words.push((shown ?? '').replace(/<([0-9a-f]*)>|-?[\d.]+/gi, (_, hex?: string) => (hex?.match(/.{4}/g) ?? []).map((glyph) => font.get(glyph.toLowerCase()) ?? '').join('')).replace(/\s+/g, ' '));
  }
  return words.join('').replace(/\s+/g, '');
}
