import { FileRefusal } from "../refusal";
import { headBytes } from "./limits";

export const textEncodings = ["utf-8", "utf-16le", "utf-16be", "windows-1252"] as const;
export type TextEncoding = (typeof textEncodings)[number];
export type DetectedText = {
  encoding: TextEncoding;
  /** True when the file begins with a byte order mark. */
  bom: boolean;
  /** certain: a mark or valid UTF-8 beyond ASCII; likely: plain ASCII so far; unsure: everything else. */
  confidence: "certain" | "likely" | "unsure";
  /** The other encodings worth offering, likeliest first. */
  alternatives: TextEncoding[];
};

const signatures: { bytes: number[]; what: string; workbook: boolean }[] = [
  { bytes: [0x50, 0x4b, 0x03, 0x04], what: "a spreadsheet workbook or a ZIP archive", workbook: true },
  { bytes: [0xd0, 0xcf, 0x11, 0xe0], what: "an old spreadsheet workbook", workbook: true },
  { bytes: [0x25, 0x50, 0x44, 0x46], what: "a PDF", workbook: false },
  { bytes: [0x89, 0x50, 0x4e, 0x47], what: "a picture", workbook: false },
  { bytes: [0xff, 0xd8, 0xff], what: "a picture", workbook: false },
  { bytes: [0x47, 0x49, 0x46, 0x38], what: "a picture", workbook: false },
  { bytes: [0x1f, 0x8b], what: "a compressed archive", workbook: false },
];
const saveAsCsv = "Open it in the spreadsheet program, choose Save as, “CSV UTF-8”, and upload that file.";

/**
 * Says how the beginning of a file (64 KiB are enough) is encoded.
 * Throws `FileRefusal` for an empty file, a workbook and other binary content.
 * A later byte may still contradict plain ASCII: `detectTextOfStream` looks at the whole file.
 */
export function detectText(head: Uint8Array): DetectedText {
  if (head.length === 0) throw emptyFile();
  const marked = detectMark(head);
  if (marked) return found(marked, true, "certain");
  refuseKnownBinary(head);
  const wide = detectWide(head);
  if (wide) return found(wide, false, "unsure");
  if (looksBinary(head)) throw binaryFile("something that is not text");
  if (isAscii(head)) return found("utf-8", false, "likely");
  return isUtf8(head) ? found("utf-8", false, "certain") : found("windows-1252", false, "unsure");
}

/**
 * The same for a whole file in bounded memory: the head decides, and every later byte may still turn UTF-8
 * into Windows-1252 (one accented name far down in an otherwise plain file).
 */
export async function detectTextOfStream(chunks: AsyncIterable<Uint8Array>): Promise<DetectedText> {
  const scan = new Utf8Scan();
  let head = new Uint8Array();
  let detected: DetectedText | undefined;
  for await (const chunk of chunks) {
    scan.push(chunk);
    if (!detected) {
      head = join(head, chunk);
      if (head.length < headBytes) continue;
      detected = detectText(head);
    }
    if (detected.encoding !== "utf-8") return detected;
    if (!scan.valid) return afterInvalidUtf8(detected);
  }
  detected ??= detectText(head);
  if (detected.encoding !== "utf-8" || detected.bom) return detected;
  if (!scan.end()) return afterInvalidUtf8(detected);
  return scan.plain ? detected : found("utf-8", false, "certain");
}

/** Follows a file through: was every byte ASCII so far, was all of it valid UTF-8? */
class Utf8Scan {
  plain = true;
  valid = true;
  private readonly decoder = new TextDecoder("utf-8", { fatal: true });

  push(chunk: Uint8Array) {
    if (!this.valid) return;
    this.plain &&= isAscii(chunk);
    this.valid = decodes(this.decoder, chunk);
  }

  end() {
    this.valid &&= decodes(this.decoder);
    return this.valid;
  }
}

function join(first: Uint8Array, second: Uint8Array) {
  const both = new Uint8Array(first.length + second.length);
  both.set(first);
  both.set(second, first.length);
  return both;
}

function afterInvalidUtf8(detected: DetectedText): DetectedText {
  // A byte order mark promised UTF-8: decoding will say where it is broken rather than change its mind here.
  return detected.bom ? detected : found("windows-1252", false, "unsure");
}

function found(encoding: TextEncoding, bom: boolean, confidence: DetectedText["confidence"]): DetectedText {
  return { encoding, bom, confidence, alternatives: textEncodings.filter((other) => other !== encoding) };
}

function detectMark(head: Uint8Array): TextEncoding | undefined {
  if (head[0] === 0xef && head[1] === 0xbb && head[2] === 0xbf) return "utf-8";
  if (head[0] === 0xff && head[1] === 0xfe) return "utf-16le";
  if (head[0] === 0xfe && head[1] === 0xff) return "utf-16be";
  return undefined;
}

/** UTF-16 without a mark: the zero bytes of delimiters, digits and line breaks all sit on one side. */
function detectWide(head: Uint8Array): TextEncoding | undefined {
  const zeros = [0, 0];
  head.forEach((byte, index) => {
    if (byte === 0) zeros[index % 2] = (zeros[index % 2] ?? 0) + 1;
  });
  const [even = 0, odd = 0] = zeros;
  const units = head.length / 2;
  if (odd > units * 0.2 && even === 0 && isWideText(head, "utf-16le")) return "utf-16le";
  if (even > units * 0.2 && odd === 0 && isWideText(head, "utf-16be")) return "utf-16be";
  return undefined;
}

function isWideText(head: Uint8Array, encoding: TextEncoding) {
  const decoder = new TextDecoder(encoding, { fatal: true });
  if (!decodes(decoder, head)) return false;
  // biome-ignore lint/suspicious/noControlCharactersInRegex: control characters are what tells binary from text
  return !/[\u0000-\u0008\u000e-\u001f]/u.test(new TextDecoder(encoding).decode(head, { stream: true }));
}

function refuseKnownBinary(head: Uint8Array) {
  const known = signatures.find(({ bytes }) => bytes.every((byte, index) => head[index] === byte));
  if (!known) return;
  if (known.workbook) {
    throw new FileRefusal("workbook", `The file is ${known.what}, not a CSV file.`, saveAsCsv);
  }
  throw binaryFile(known.what);
}

function looksBinary(head: Uint8Array) {
  let controls = 0;
  for (const byte of head) {
    if (byte === 0) return true;
    const allowed = byte === 9 || byte === 10 || byte === 11 || byte === 12 || byte === 13 || byte === 0x1a;
    if (byte < 32 && !allowed) controls += 1;
  }
  return controls > Math.max(1, head.length * 0.01);
}

function isAscii(bytes: Uint8Array) {
  return bytes.every((byte) => byte < 0x80);
}

function isUtf8(head: Uint8Array) {
  return decodes(new TextDecoder("utf-8", { fatal: true }), head);
}

/** Feeds a chunk (nothing: the end) and says whether the decoder accepts it; a cut last letter is accepted. */
function decodes(decoder: TextDecoder, chunk?: Uint8Array) {
  try {
    if (chunk) decoder.decode(chunk, { stream: true });
    else decoder.decode();
    return true;
  } catch {
    return false;
  }
}

export function emptyFile() {
  return new FileRefusal(
    "empty",
    "The file is empty.",
    "Upload a file with a header row and at least one row below it.",
  );
}

export function binaryFile(what: string) {
  return new FileRefusal("binary", `The file holds ${what}, not a table as text.`, saveAsCsv);
}
