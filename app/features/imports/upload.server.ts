import { createHash, randomUUID } from "node:crypto";
import { audit } from "~/platform/audit.server";
import { DomainError } from "~/platform/errors";
import { enqueue } from "~/platform/jobs/queue.server";
import { write } from "~db/client.server";
import type { ImportKind } from "~db/schema/codes";
import type { MemberScope } from "../accounts/scope.server";
import { allowLongWork, insertChunk, insertImport } from "./imports.queries.server";
import { prepareImport } from "./prepare.server";
import { readingLimits } from "./reading/limits";

/** Files up to this are read while the person waits, so that the preview is the next page: about 2,000 rows. */
export const smallFileBytes = 300_000;
export const smallRowCount = 2000;
const chunkBytes = 256 * 1024;
/** The form around the file: its fields and the boundaries between them. */
const formBytes = 64 * 1024;
const megabytes = Math.round(readingLimits.bytes / 1024 / 1024);

function tooLarge() {
  const message = `The file is larger than ${megabytes} MB. Split it, for example by season or by team, and import the parts one after the other.`;
  return new DomainError("too_large", message, { fields: { file: [message] } });
}

/**
 * Refuses a request whose body is too large for one file, before any of it is read. The body itself is then read by
 * the platform's `formData()`, which holds the file once: at most the limit.
 * @throws DomainError too_large, or invalid where the length is not declared
 */
export function checkUploadLength(request: Request) {
  const declared = request.headers.get("content-length");
  if (declared === null || !/^\d+$/u.test(declared))
    throw new DomainError(
      "invalid",
      "The length of the upload is not declared. Send the file from this page.",
    );
  if (Number(declared) > readingLimits.bytes + formBytes) throw tooLarge();
}

async function* cut(file: Blob): AsyncGenerator<Uint8Array> {
  for (let at = 0; at < file.size; at += chunkBytes)
    yield new Uint8Array(await file.slice(at, at + chunkBytes).arrayBuffer());
}

/**
 * Stores an uploaded file in chunks, with its SHA-256, and has it read: a small one at once, a large one by the job.
 * Neither reads its meaning from its name or its declared type.
 * @returns the new import's id
 */
export async function uploadImport(scope: MemberScope, kind: ImportKind, file: File) {
  if (file.size > readingLimits.bytes) throw tooLarge();
  const id = randomUUID();
  const hash = createHash("sha256");
  for await (const bytes of cut(file)) hash.update(bytes);
  const row = { id, kind, fileName: shortName(file.name), fileHash: hash.digest("hex"), fileSize: file.size };
  await write(scope, async (tx) => {
    await allowLongWork(tx);
    await insertImport(tx, row);
    let position = 0;
    for await (const bytes of cut(file)) {
      await insertChunk(tx, id, position, bytes);
      position += 1;
    }
    await audit(tx, { action: "import.upload", subjectId: id, fields: { kind, roles: [...scope.roles] } });
    await enqueueWork(tx, id);
  });
  if (file.size <= smallFileBytes) await prepareImport(scope, id);
  return { id };
}

/** The job also picks up what a killed process left; where the work is done already it finds nothing to do. */
export function enqueueWork(tx: Parameters<typeof enqueue>[0], importId: string) {
  const { organisationId, personId } = tx.scope;
  return enqueue(tx, "import", { organisationId, importId, personId: personId ?? "" });
}

/** A name to show, not a path: control characters out, at most 200 letters. */
function shortName(name: string) {
  const last = name.split(/[\\/]/u).at(-1) ?? "";
  const clean = last.replace(/\p{C}/gu, "").trim();
  return clean.slice(0, 200) || "file without a name";
}
