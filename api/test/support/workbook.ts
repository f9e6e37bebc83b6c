import { crc32, deflateRawSync } from 'node:zlib';

const PARTS = {
  '[Content_Types].xml':
    '<Types xmlns="http://schemas.openxmlformats.org/package/2006/content-types"><Default Extension="rels" ContentType="application/vnd.openxmlformats-package.relationships+xml"/><Override PartName="/xl/workbook.xml" ContentType="application/vnd.openxmlformats-officedocument.spreadsheetml.sheet.main+xml"/><Override PartName="/xl/worksheets/sheet1.xml" ContentType="application/vnd.openxmlformats-officedocument.spreadsheetml.worksheet+xml"/></Types>',
  '_rels/.rels':
    '<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"><Relationship Id="rId1" Type="http://schemas.openxmlformats.org/officeDocument/2006/relationships/officeDocument" Target="xl/workbook.xml"/></Relationships>',
  'xl/workbook.xml':
    '<workbook xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main" xmlns:r="http://schemas.openxmlformats.org/officeDocument/2006/relationships"><sheets><sheet name="Schedule" sheetId="1" r:id="rId1"/></sheets></workbook>',
  'xl/_rels/workbook.xml.rels':
    '<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"><Relationship Id="rId1" Type="http://schemas.openxmlformats.org/officeDocument/2006/relationships/worksheet" Target="worksheets/sheet1.xml"/></Relationships>',
};
const HEADER = '<row r="1"><c r="A1" t="inlineStr"><is><t>Description</t></is></c><c r="B1" t="inlineStr"><is><t>Scheduled value</t></is></c></row>';

/** A workbook written by hand, so that it can hold what no spreadsheet program would write. */
export function workbook(rows: string, options: { afterRows?: string; claimedBytes?: number } = {}): Buffer {
  const sheet = `<worksheet xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"><sheetData>${HEADER}${rows}</sheetData>${options.afterRows ?? ''}</worksheet>`;
  return zip({ ...PARTS, 'xl/worksheets/sheet1.xml': sheet }, options.claimedBytes);
}

function zip(parts: Record<string, string>, claimedBytes?: number): Buffer {
  const files: Buffer[] = [];
  const directory: Buffer[] = [];
  let at = 0;
  for (const [name, text] of Object.entries(parts)) {
    const content = Buffer.from(text);
    const packed = deflateRawSync(content);
    const common = Buffer.alloc(26);
    [20, 0x0800, 8, 0, 0x2100].forEach((value, i) => common.writeUInt16LE(value, i * 2));
    [crc32(content), packed.length, claimedBytes ?? content.length].forEach((value, i) => common.writeUInt32LE(value, 10 + i * 4));
    common.writeUInt16LE(Buffer.byteLength(name), 22);
    const file = Buffer.concat([Buffer.from([0x50, 0x4b, 3, 4]), common, Buffer.from(name), packed]);
    const tail = Buffer.alloc(14);
    tail.writeUInt32LE(at, 10);
    directory.push(Buffer.concat([Buffer.from([0x50, 0x4b, 1, 2, 20, 0]), common, tail, Buffer.from(name)]));
    files.push(file);
    at += file.length;
  }
  const listed = Buffer.concat(directory);
  const end = Buffer.alloc(22);
  end.writeUInt32LE(0x06054b50, 0);
  [directory.length, directory.length].forEach((count, i) => end.writeUInt16LE(count, 8 + i * 2));
  [listed.length, at].forEach((value, i) => end.writeUInt32LE(value, 12 + i * 4));
  return Buffer.concat([...files, listed, end]);
}
