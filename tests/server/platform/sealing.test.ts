import { randomUUID } from "node:crypto";
import { join } from "node:path";
import { getTableName } from "drizzle-orm";
import { getTableConfig } from "drizzle-orm/pg-core";
import { beforeAll, describe, expect, it } from "vitest";
import { masterKey, sealer } from "~/platform/crypto/keys.server";
import { keyOpens, makeKeyCheck, makeWrappedKey, unwrapKey } from "~/platform/crypto/sealing.server";
import { read } from "~db/client.server";
import { tenancy } from "~db/schema/tenancy";
import { run } from "../../../app/platform/machine/command.mjs";
import { ensureBinaries, environmentOf } from "../../../db/local-server/binaries.mjs";
import { maintenance, makeClub, makeCoachReport, makeInjury, owner } from "../../harness";
import { inDatabase } from "../../harness/cluster";

let club: Awaited<ReturnType<typeof makeClub>>;
beforeAll(async () => {
  club = await makeClub();
});

const place = (row: string, version = 1) => ({
  table: "injury_revisions",
  column: "description",
  row,
  version,
});

describe("sealed text", () => {
  it("opens in its own place and in no other", async () => {
    const other = await makeClub();
    const row = randomUUID();
    const seals = await read(club.scopes.lead, sealer);
    const elsewhere = await read(other.scopes.lead, sealer);
    const bytes = seals.seal(place(row), "Turned on the left knee.");
    expect(seals.open(place(row), bytes)).toBe("Turned on the left knee.");
    const moved = [
      { ...place(row), row: randomUUID() },
      { ...place(row), version: 2 },
      { ...place(row), column: "diagnosis" },
      { ...place(row), table: "injury_notes" },
    ];
    for (const where of moved) expect(() => seals.open(where, bytes)).toThrow();
    expect(() => elsewhere.open(place(row), bytes)).toThrow();
  });

  it("does not open when a single bit has changed", async () => {
    const row = randomUUID();
    const seals = await read(club.scopes.lead, sealer);
    const bytes = Buffer.from(seals.sealRequired(place(row), "Short."));
    for (let index = 0; index < bytes.length; index++) {
      const changed = Buffer.from(bytes);
      changed[index] = (changed[index] ?? 0) ^ 1;
      expect(() => seals.open(place(row), changed)).toThrow();
    }
    expect(() => seals.open(place(row), bytes.subarray(0, -1))).toThrow();
  });

  it("is another each time, and nothing is sealed for nothing", async () => {
    const row = randomUUID();
    const seals = await read(club.scopes.lead, sealer);
    const twice = [0, 1].map(() =>
      Buffer.from(seals.sealRequired(place(row), "The same words.")).toString("hex"),
    );
    expect(twice[0]).not.toBe(twice[1]);
    expect([seals.seal(place(row), ""), seals.seal(place(row), null)]).toEqual([null, null]);
    expect(() => seals.sealRequired(place(row), "")).toThrow("must not be empty");
  });

  it("opens with a data key of its own organisation and version, wrapped by the one master key", () => {
    const id = randomUUID();
    const wrapped = makeWrappedKey(masterKey(), id, 1);
    expect(unwrapKey(masterKey(), id, 1, wrapped)).toHaveLength(32);
    expect(() => unwrapKey(masterKey(), randomUUID(), 1, wrapped)).toThrow();
    expect(() => unwrapKey(masterKey(), id, 2, wrapped)).toThrow();
    expect(() => unwrapKey(Buffer.alloc(32, 1), id, 1, wrapped)).toThrow();
    const check = makeKeyCheck(masterKey());
    expect([keyOpens(masterKey(), check), keyOpens(Buffer.alloc(32, 1), check)]).toEqual([true, false]);
  });
});

describe("a dump of the database", () => {
  const planted = [
    "heard a pop while planting the left foot",
    "suspected rupture of the cruciate ligament",
    "guardian phoned from the touchline at noon",
    "crying and could not stand without help",
    "limped off and sat by the fence",
  ] as const;

  beforeAll(async () => {
    const { staff, athlete } = club;
    await makeInjury(staff, {
      athleteId: athlete.id,
      description: planted[0],
      diagnosis: planted[1],
      phoned: planted[2],
      notes: [planted[3]],
    });
    await makeCoachReport(staff, { athleteId: athlete.id, note: planted[4] });
  });

  it("holds no planted clinical sentence, in whatever form it is written", async () => {
    const { folder, ...binaries } = await ensureBinaries();
    const { output, code } = await run(
      join(folder, "pg_dump"),
      ["--data-only", "--inserts", `--dbname=${process.env.DATABASE_MAINTENANCE_URL}`],
      { env: environmentOf({ folder, ...binaries }) },
    );
    expect(code === 0 ? "" : output).toBe("");
    // The dump is whole: it holds what is kept in clear, beside what is sealed.
    expect(output).toContain(club.athlete.familyName);
    expect(output).toContain("INSERT INTO public.injury_notes");
    for (const sentence of planted)
      for (const form of ["utf8", "hex", "base64"] as const)
        expect(output).not.toContain(Buffer.from(sentence).toString(form).replace(/=+$/, ""));
    expect(output).not.toContain(masterKey().toString("base64"));
    expect(output).not.toContain(masterKey().toString("hex"));
  });

  it("would show a sentence that was written in clear", async () => {
    // What the test above relies on: the same search finds text that nobody sealed.
    const rows = await maintenance()`select 1 from athletes where family_name = ${club.athlete.familyName}`;
    expect(rows).toHaveLength(1);
    expect(inDatabase(process.env.DATABASE_MAINTENANCE_URL ?? "", "x")).toContain("haleside_maintenance");
  });
});

describe("the audit log", () => {
  it("is written by everybody who acts and changed by nobody of the application", async () => {
    const rows = await owner()<{ privilege: string }[]>`
      select lower(privilege_type) as privilege from information_schema.role_table_grants
      where grantee = 'haleside_app' and table_name = 'audit_events' order by 1`;
    expect(rows.map(({ privilege }) => privilege)).toEqual(["insert", "select"]);
  });
});

it("seals every column of free clinical text", () => {
  const sealed = tenancy.flatMap(({ table }) =>
    getTableConfig(table)
      .columns.filter((column) => column.getSQLType() === "bytea")
      .map((column) => `${getTableName(table)}.${column.name}`),
  );
  expect(sealed).toEqual(
    expect.arrayContaining([
      "safeguarding_holds.reason",
      "guardianships.legal_limits",
      "injury_revisions.description",
      "injury_revisions.diagnosis",
      "injury_revisions.phoned",
      "injury_diagnoses.diagnosis",
      "injury_notes.text",
      "coach_reports.note",
      "coach_reports.phoned",
      "coach_report_outcomes.reason",
      "encounters.note",
      "notices.content",
      "notice_events.detail",
      "form_drafts.body",
    ]),
  );
});
