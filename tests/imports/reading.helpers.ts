import { readFile } from "node:fs/promises";
import { decodeHead, decodeStream } from "~/features/imports/reading/decode-stream";
import { type DialectOptions, detectDialect } from "~/features/imports/reading/detect-dialect";
import { detectText, detectTextOfStream, type TextEncoding } from "~/features/imports/reading/detect-text";
import { headBytes, type ReadingLimits, readingLimits } from "~/features/imports/reading/limits";
import { type ReadRow, readRows } from "~/features/imports/reading/read-rows";

export async function* chunked<T extends { length: number; slice(from: number, to: number): T }>(
  whole: T,
  size = 1000,
): AsyncGenerator<T> {
  for (let at = 0; at < whole.length; at += size) yield whole.slice(at, at + size);
}

export async function collect<T>(items: AsyncIterable<T>) {
  const all: T[] = [];
  for await (const item of items) all.push(item);
  return all;
}

export type ReadFileOptions = DialectOptions & {
  encoding?: TextEncoding;
  chunkSize?: number;
  limits?: ReadingLimits;
};

/** Does what an import does with a file: detect, decode, find the dialect, read. */
export async function readBytes(bytes: Uint8Array, options: ReadFileOptions = {}) {
  const head = bytes.slice(0, headBytes);
  detectText(head);
  const detected = await detectTextOfStream(chunked(bytes, options.chunkSize));
  const encoding = options.encoding ?? detected.encoding;
  const dialect = detectDialect(decodeHead(head, encoding), {
    ...options,
    complete: head.length === bytes.length,
  });
  const limits = options.limits ?? readingLimits;
  const text = decodeStream(chunked(bytes, options.chunkSize), encoding, limits);
  const rows = await collect(readRows(text, dialect, limits));
  return { detected, dialect, rows };
}

export async function readSample(path: string, options?: ReadFileOptions) {
  return readBytes(
    new Uint8Array(await readFile(new URL(`../../imports/${path}`, import.meta.url))),
    options,
  );
}

export function dataRows(rows: ReadRow[]) {
  return rows.filter((row) => row.kind === "row");
}

const windows1252 = new Map<string, number>();
const decoder = new TextDecoder("windows-1252");
for (let byte = 0; byte < 256; byte += 1) {
  windows1252.set(decoder.decode(new Uint8Array([byte]), { stream: true }), byte);
}

export function isWindows1252(text: string) {
  return [...text].every((letter) => windows1252.has(letter));
}

/** Writes text in one of the encodings, since the platform itself only writes UTF-8. */
export function encode(text: string, encoding: TextEncoding, bom = false): Uint8Array {
  const marked = bom ? `\uFEFF${text}` : text;
  if (encoding === "utf-8") return new TextEncoder().encode(marked);
  if (encoding === "windows-1252") {
    return Uint8Array.from([...text], (letter) => windows1252.get(letter) ?? 0x3f);
  }
  const bytes = Buffer.from(marked, "utf16le");
  return new Uint8Array(encoding === "utf-16be" ? bytes.swap16() : bytes);
}
