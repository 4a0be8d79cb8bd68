import { FileRefusal } from "../refusal";
import { binaryFile } from "./detect-text";
import { type ReadingLimits, readingLimits } from "./limits";

export type SplitRecord = {
  text: string;
  /** Line of the file, from 1, on which the record begins, and on which it ends. */
  lineNumber: number;
  lastLine: number;
  /** A quotation mark inside a quoted cell is not doubled: the borders of its cells are doubtful. */
  strayQuote: boolean;
};

const State = { CellStart: 0, Plain: 1, Quoted: 2, AfterQuote: 3, AfterQuoteSpace: 4 } as const;
type State = (typeof State)[keyof typeof State];

const lineFeed = 10;
const carriageReturn = 13;
const quote = 34;

/**
 * Cuts decoded text into records without holding more than one of them. It knows only where a record ends
 * (LF, CR LF or CR outside quotation marks, mixed if need be), on which line it began, and the limits; the
 * cells are the CSV parser's business. This is what keeps memory flat under an open quotation mark and gives
 * true line numbers when quoted cells hold line breaks.
 */
export class RecordSplitter {
  private state: State = State.CellStart;
  private carry = "";
  private scanned = 0;
  private cellStart = 0;
  private columns = 1;
  private line = 1;
  private recordLine = 1;
  private quoteLine = 1;
  private quotedBreaks = 0;
  private strayQuote = false;
  private afterReturn = false;
  private readonly delimiter: number;
  private readonly limits: ReadingLimits;

  constructor(delimiter: string, limits: ReadingLimits = readingLimits) {
    this.delimiter = delimiter.charCodeAt(0);
    this.limits = limits;
  }

  /** Takes the next text and returns the records it completes. Throws `FileRefusal` past a limit. */
  push(chunk: string): SplitRecord[] {
    const text = this.carry + chunk;
    const records: SplitRecord[] = [];
    let start = 0;
    for (let i = this.scanned; i < text.length; i += 1) {
      const code = text.charCodeAt(i);
      if (code === 0) throw binaryFile("zero bytes, which no text has");
      if (this.afterReturn) {
        this.afterReturn = false;
        if (code === lineFeed) {
          if (this.state === State.CellStart && i === start) {
            start = i + 1;
            this.cellStart = start;
          }
          continue;
        }
      }
      const ends = this.step(code, i);
      const marks = this.state === State.Plain ? 0 : 2;
      if (!ends && i + 1 - this.cellStart > this.limits.cellLength + marks) this.refuseLongCell();
      if (ends) {
        records.push(this.finish(text.slice(start, i), this.line - 1));
        start = i + 1;
        this.cellStart = start;
      }
      if (i + 1 - start > this.limits.rowLength) this.refuseLongRow();
    }
    this.carry = text.slice(start);
    this.scanned = this.carry.length;
    this.cellStart -= start;
    return records;
  }

  /** Ends the text and returns the last record, if there is one without a line break. */
  end(): SplitRecord[] {
    if (this.state === State.Quoted) this.refuseOpenQuote();
    if (this.carry === "") return [];
    const last = this.finish(this.carry, this.line);
    this.carry = "";
    this.scanned = 0;
    return [last];
  }

  /** Moves on by one character; true when it ends the record. */
  private step(code: number, index: number) {
    const breaks = code === lineFeed || code === carriageReturn;
    if (breaks) {
      this.line += 1;
      this.afterReturn = code === carriageReturn;
    }
    if (this.state === State.Quoted) {
      if (code === quote) this.state = State.AfterQuote;
      if (breaks) this.quotedBreaks += 1;
      return false;
    }
    if (breaks) return true;
    if (code === this.delimiter) {
      this.startCell(index + 1);
      return false;
    }
    this.state = this.within(code);
    return false;
  }

  private within(code: number): State {
    if (this.state === State.Plain) return State.Plain;
    if (this.state === State.CellStart) {
      if (code !== quote) return State.Plain;
      this.quoteLine = this.line;
      this.quotedBreaks = 0;
      return State.Quoted;
    }
    if (code === quote) return this.state === State.AfterQuote ? State.Quoted : State.AfterQuote;
    if (code === 32 || code === 9) return State.AfterQuoteSpace;
    this.strayQuote = true;
    return State.Quoted;
  }

  private startCell(at: number) {
    this.state = State.CellStart;
    this.cellStart = at;
    this.columns += 1;
    if (this.columns <= this.limits.columns) return;
    throw new FileRefusal(
      "too-many-columns",
      `Line ${this.recordLine} has more than ${this.limits.columns} columns.`,
      "Check that the delimiter is right, or delete the columns that are not needed.",
      this.recordLine,
    );
  }

  private finish(text: string, lastLine: number): SplitRecord {
    const record = { text, lineNumber: this.recordLine, lastLine, strayQuote: this.strayQuote };
    this.state = State.CellStart;
    this.columns = 1;
    this.recordLine = this.line;
    this.strayQuote = false;
    return record;
  }

  private refuseLongCell(): never {
    if (this.state === State.Quoted && this.quotedBreaks > 0) this.refuseOpenQuote();
    throw new FileRefusal(
      "cell-too-long",
      `A cell of line ${this.recordLine} is longer than ${format(this.limits.cellLength)} characters.`,
      "Shorten the cell or delete the column that holds it.",
      this.recordLine,
    );
  }

  private refuseLongRow(): never {
    throw new FileRefusal(
      "row-too-long",
      `Line ${this.recordLine} is longer than ${format(this.limits.rowLength)} characters.`,
      "Delete the columns that are not needed.",
      this.recordLine,
    );
  }

  private refuseOpenQuote(): never {
    throw new FileRefusal(
      "unterminated-quote",
      `The quotation mark opened on line ${this.quoteLine} is never closed.`,
      `Close or delete the quotation mark on line ${this.quoteLine} and upload the file again.`,
      this.quoteLine,
    );
  }
}

function format(count: number) {
  return count.toLocaleString("en-GB");
}
