export type CsvRow = {
  /** The line of the file on which it begins, from 1. */
  line: number;
  cells: string[];
};

const QUOTE = '"';

/** Longer than any sweep of 4001 points; beyond it a quote was never closed. */
export const MOST_CHARACTERS_A_ROW = 4_000_000;

/**
 * Splits delimited text into rows of cells as it comes (RFC 4180: quotes, doubled quotes, line ends within quotes). Pieces may be
 * cut anywhere. Lines end with LF or CR LF, or with CR alone where `lineEnd` says so. Blank lines are left out. A quote within a cell
 * that does not begin with one is text.
 *
 * @throws RangeError when a row grows beyond 4 million characters.
 */
export class CsvSplitter {
  private text = "";
  private line = 1;
  /** Where the next quote stands at or behind the place looked at; the text's length when there is none. */
  private quote = 0;

  constructor(
    private readonly delimiter: string,
    private readonly lineEnd: "\n" | "\r" = "\n",
  ) {}

  /** Lines of all rows that were split off. */
  get linesRead(): number {
    return this.line - 1;
  }

  push(piece: string): CsvRow[] {
    this.text += piece;
    return this.take(false);
  }

  end(): CsvRow[] {
    return this.take(true);
  }

  private take(ended: boolean): CsvRow[] {
    const { text } = this;
    const rows: CsvRow[] = [];
    let from = 0;
    this.quote = -1;
    while (from < text.length) {
      const { end, quoted } = this.findEnd(from, ended);
      if (end < 0) break;
      const row = text.slice(from, text[end - 1] === "\r" && end > from ? end - 1 : end);
      if (row.trim() !== "") rows.push({ line: this.line, cells: quoted ? splitQuoted(row, this.delimiter) : row.split(this.delimiter) });
      this.line += 1 + (quoted ? row.split(this.lineEnd).length - 1 : 0);
      from = end + 1;
    }
    this.text = text.slice(from);
    if (this.text.length > MOST_CHARACTERS_A_ROW) throw new RangeError(`line ${this.line} has no end within ${MOST_CHARACTERS_A_ROW} characters; is a quotation mark open?`);
    return rows;
  }

  /** Where the row that begins at `from` ends; −1 while that cannot be told. */
  private findEnd(from: number, ended: boolean): { end: number; quoted: boolean } {
    const open = { end: ended ? this.text.length : -1, quoted: true };
    let quoted = false;
    let at = from;
    for (;;) {
      const end = this.text.indexOf(this.lineEnd, at);
      const quote = this.nextQuote(at);
      if (end >= 0 ? end < quote : quote === this.text.length) return end >= 0 ? { end, quoted } : { ...open, quoted };
      at = quote + 1;
      if (quote !== from && !this.text.endsWith(this.delimiter, quote)) continue;
      quoted = true;
      at = behindQuoted(this.text, quote);
      if (at < 0 || (at === this.text.length && !ended)) return open;
    }
  }

  private nextQuote(from: number): number {
    if (this.quote < from) {
      const found = this.text.indexOf(QUOTE, from);
      this.quote = found < 0 ? this.text.length : found;
    }
    return this.quote;
  }
}

/** The place behind the quote that closes the cell opened at `quote`; −1 when there is none. */
function behindQuoted(text: string, quote: number): number {
  for (let at = quote + 1; ; at += 2) {
    at = text.indexOf(QUOTE, at);
    if (at < 0) return -1;
    if (text[at + 1] !== QUOTE) return at + 1;
  }
}

function splitQuoted(row: string, delimiter: string): string[] {
  const cells: string[] = [];
  for (let at = 0; ; ) {
    const behind = row[at] === QUOTE ? behindQuoted(row, at) : -1;
    const next = row.indexOf(delimiter, Math.max(behind, at));
    const end = next < 0 ? row.length : next;
    cells.push(behind < 0 ? row.slice(at, end) : row.slice(at + 1, behind - 1).replaceAll('""', QUOTE) + row.slice(behind, end));
    if (next < 0) return cells;
    at = next + delimiter.length;
  }
}
