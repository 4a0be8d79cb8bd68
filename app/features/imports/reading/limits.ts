/** What one imported file may hold. Past any of these the file is refused as a whole, early. */
export type ReadingLimits = {
  /** Bytes of the file as uploaded. */
  bytes: number;
  /** Rows below the header. */
  rows: number;
  columns: number;
  /** UTF-16 code units of one cell; 32,767 is what a spreadsheet cell can hold. */
  cellLength: number;
  /** UTF-16 code units of one row; bounds the memory that an open quotation mark can take. */
  rowLength: number;
};

export const readingLimits: ReadingLimits = {
  bytes: 40 * 1024 * 1024,
  rows: 200_000,
  columns: 300,
  cellLength: 32_767,
  rowLength: 262_144,
};

/** How many bytes of the beginning are enough to detect encoding and dialect. */
export const headBytes = 64 * 1024;
