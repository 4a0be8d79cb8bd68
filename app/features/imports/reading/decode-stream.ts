import { FileRefusal } from "../refusal";
import type { TextEncoding } from "./detect-text";
import { type ReadingLimits, readingLimits } from "./limits";

const names: Record<TextEncoding, string> = {
  "utf-8": "UTF-8",
  "utf-16le": "UTF-16 (little-endian)",
  "utf-16be": "UTF-16 (big-endian)",
  "windows-1252": "Windows-1252",
};

/**
 * Decodes a file's bytes to text, chunk by chunk; a letter cut by a chunk border comes out whole and a byte
 * order mark is dropped. Bytes that the encoding does not know are refused, never replaced: a replaced
 * letter in a name is lost for good.
 */
export async function* decodeStream(
  chunks: AsyncIterable<Uint8Array>,
  encoding: TextEncoding,
  limits: ReadingLimits = readingLimits,
): AsyncGenerator<string> {
  const decoder = new TextDecoder(encoding, { fatal: true });
  let bytes = 0;
  let lines = 1;
  for await (const chunk of chunks) {
    bytes += chunk.length;
    if (bytes > limits.bytes) throw tooManyBytes(limits);
    const text = decode(decoder, encoding, lines, chunk);
    lines += countLines(text);
    if (text) yield text;
  }
  const rest = decode(decoder, encoding, lines);
  if (rest) yield rest;
}

/** Decodes the head of a file for previews and detection; a letter cut at its end is left out. */
export function decodeHead(head: Uint8Array, encoding: TextEncoding) {
  return decode(new TextDecoder(encoding, { fatal: true }), encoding, 1, head);
}

function decode(decoder: TextDecoder, encoding: TextEncoding, line: number, chunk?: Uint8Array) {
  try {
    // Always as a stream: Node 20's one-shot windows-1252 path decodes 0x80 to 0x9F as Latin-1 instead.
    return chunk ? decoder.decode(chunk, { stream: true }) : decoder.decode();
  } catch {
    throw new FileRefusal(
      "wrong-encoding",
      `From about line ${line} on, the file is not ${names[encoding]} text.`,
      "Choose another encoding and check in the preview that accented letters look right.",
      line,
    );
  }
}

function countLines(text: string) {
  let count = 0;
  for (let at = text.indexOf("\n"); at !== -1; at = text.indexOf("\n", at + 1)) count += 1;
  return count;
}

function tooManyBytes(limits: ReadingLimits) {
  const megabytes = Math.round(limits.bytes / 1024 / 1024);
  return new FileRefusal(
    "too-many-bytes",
    `The file is larger than ${megabytes} MB.`,
    "Split it, for example by season or by team, and import the parts one after the other.",
  );
}
