/**
 * Cells as spreadsheet programs put them on the clipboard: tabs between cells, lines between rows, a cell with a tab, line or quote in
 * quotes. The line break that ends the last row is not a row.
 */
export function cellsFromClipboard(text: string): string[][] {
  const rows: string[][] = [[]];
  let cell = '';
  let quoted = false;
  const endCell = () => {
    rows.at(-1)?.push(cell);
    cell = '';
  };
  for (let i = 0; i < text.length; i += 1) {
    const char = text[i];
    if (quoted && char === '"' && text[i + 1] === '"') {
      cell += '"';
      i += 1;
    } else if (quoted ? char === '"' : char === '"' && cell === '') quoted = !quoted;
    else if (!quoted && char === '\t') endCell();
    else if (!quoted && (char === '\n' || char === '\r')) {
      if (char === '\r' && text[i + 1] === '\n') i += 1;
      endCell();
      rows.push([]);
    } else cell += char;
  }
  endCell();
  const last = rows.at(-1);
  if (rows.length > 1 && last?.length === 1 && last[0] === '') rows.pop();
  return rows.map((row) => row.map((found) => found.replace(/\s*\n\s*/g, ' ')));
}
