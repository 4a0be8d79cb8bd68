/** Why a whole file cannot be read. */
export type RefusalCode =
  | "empty"
  | "binary"
  | "workbook"
  | "wrong-encoding"
  | "header-only"
  | "unterminated-quote"
  | "cell-too-long"
  | "row-too-long"
  | "too-many-columns"
  | "too-many-rows"
  | "too-many-bytes";

/**
 * The refusal of a file, thrown by the readers. `reason` says what is wrong and `mend` what to do, both
 * whole sentences for the person who uploaded it; `lineNumber` counts the file's lines from 1.
 */
export class FileRefusal extends Error {
  readonly code: RefusalCode;
  readonly reason: string;
  readonly mend: string;
  readonly lineNumber: number | undefined;

  constructor(code: RefusalCode, reason: string, mend: string, lineNumber?: number) {
    super(`${reason} ${mend}`);
    this.name = "FileRefusal";
    this.code = code;
    this.reason = reason;
    this.mend = mend;
    this.lineNumber = lineNumber;
  }
}
