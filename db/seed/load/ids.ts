import { createHash } from "node:crypto";

/**
 * The id of a demo record: the same for the same organisation, kind and key each time the demo is loaded, so that
 * addresses in the README stay valid. A name-based UUID of version 8 (RFC 9562) over SHA-256.
 */
export function demoId(organisation: string, kind: string, key: string): string {
  const bytes = createHash("sha256")
    .update(JSON.stringify(["haleside demo", organisation, kind, key]))
    .digest()
    .subarray(0, 16);
  bytes.writeUInt8((bytes.readUInt8(6) & 0x0f) | 0x80, 6);
  bytes.writeUInt8((bytes.readUInt8(8) & 0x3f) | 0x80, 8);
  const hex = bytes.toString("hex");
  return [hex.slice(0, 8), hex.slice(8, 12), hex.slice(12, 16), hex.slice(16, 20), hex.slice(20)].join("-");
}
