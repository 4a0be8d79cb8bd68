import { and, eq } from "drizzle-orm";
import { beforeAll, describe, expect, it } from "vitest";
import { resolveMemberScope } from "~/features/accounts/scope.server";
import { readReport } from "~/features/injuries/coach-reports.server";
import { readInjury } from "~/features/injuries/read-injury.server";
import { answerText } from "~/features/notices/notice-content";
import { readNotice } from "~/features/notices/notices.server";
import { readGuardians } from "~/features/roster/guardians.server";
import { masterKey, sealer } from "~/platform/crypto/keys.server";
import { keyedHash } from "~/platform/crypto/sealing.server";
import { read } from "~db/client.server";
import { encounters, notices, safeguardingHolds } from "~db/schema";
import { loadDemo } from "~db/seed/load";
import { demoId } from "~db/seed/load/ids";
import { buildScenario } from "~db/seed/scenario";
import { MARRAM_BAY } from "~db/seed/scenario/plan";

/** What is sealed opens through the features' own reads, for the athletic trainer who works with it. */

const today = "2026-12-01";
const scenario = buildScenario({ today });
const idOf = (kind: string, key: string) => demoId(MARRAM_BAY, kind, key);
const own = <Row extends { organisation: string }>(rows: readonly Row[]) =>
  rows.filter(({ organisation }) => organisation === MARRAM_BAY);

beforeAll(() => loadDemo({ maintenanceUrl: process.env.DATABASE_MAINTENANCE_URL ?? "", today }));

async function trainerScope() {
  const trainer = own(scenario.memberships).find(({ role, teams }) => role === "trainer" && teams === "all");
  const scope = await resolveMemberScope(demoId("", "person", trainer?.person ?? ""), MARRAM_BAY);
  if (!scope) throw new Error("No athletic trainer.");
  return scope;
}

describe("sealed text", () => {
  it("of injuries opens: diagnoses, further diagnoses, notes, in every revision", async () => {
    const scope = await trainerScope();
    const injuries = own(scenario.injuries);
    const several = injuries.filter(({ diagnoses }) => diagnoses.length > 1);
    expect(several.length).toBeGreaterThan(0);
    for (const injury of [...several, ...injuries.slice(-12)]) {
      const page = await readInjury(scope, idOf("injury", injury.key));
      const [principal, ...further] = injury.diagnoses;
      expect(page.revision.diagnosis).toBe(principal?.words);
      expect(page.further).toHaveLength(further.length);
      for (const [index, { words }] of further.entries()) expect(page.further[index]).toContain(words);
      expect(page.notes.map(({ text }) => text)).toEqual(injury.followUps.map(({ note }) => note));
      expect(page.revision.closedOn).toBe(injury.closedOn);
      expect(page.revision.surgeryDay).toBe(injury.surgeryOn);
      // The stored relation is what the page suggests from the records themselves.
      expect(page.revision.subsequence).toBe(page.relation.subsequence);
      expect(page.revision.subsequentTo).toBe(page.relation.to);
    }
  });

  it("of coaches' reports, encounters, holds and legal limits opens", async () => {
    const scope = await trainerScope();
    const phoned = own(scenario.coachReports).filter((report) => report.phoned !== null);
    expect(phoned.length).toBeGreaterThan(3);
    for (const report of phoned.slice(0, 5)) {
      const guardian = scenario.guardians.find(({ key }) => key === report.phoned);
      const page = await readReport(scope, idOf("coach report", report.key));
      expect(page.phoned).toBe(`${guardian?.givenName} ${guardian?.familyName}`);
    }
    const [seen, holds] = await read(scope, async (tx) => {
      const { open } = await sealer(tx);
      const place = (table: string, column: string, row: string) => ({ table, column, row, version: 1 });
      const rows = await tx
        .select()
        .from(encounters)
        .where(eq(encounters.organisationId, scope.organisationId));
      const held = await tx.select().from(safeguardingHolds);
      return [
        rows.map(({ id, note }) => open(place("encounters", "note", id), note)),
        held.map(({ id, reason }) => open(place("safeguarding_holds", "reason", id), reason)),
      ] as const;
    });
    expect(seen).toHaveLength(own(scenario.encounters).length);
    expect(new Set(seen)).toContain("ankle.");
    expect(holds).toEqual(
      own(scenario.athletes).flatMap(({ safeguardingHold: hold }) => (hold ? [hold.reason] : [])),
    );
    const limited = own(scenario.guardianships).filter(({ legalLimit }) => legalLimit !== null);
    expect(limited.length).toBeGreaterThan(0);
    for (const { athlete, guardian, legalLimit } of limited) {
      const { guardians } = await readGuardians(scope, idOf("athlete", athlete));
      const found = guardians.find(({ id }) => id === idOf("guardian", guardian));
      expect(found?.legalLimits).toContain(legalLimit?.words);
      expect(found?.limitsReviewOn).toBe(legalLimit?.reviewOn);
    }
  });

  it("of notices opens, with the answer that the family knows and the state that the scenario made", async () => {
    const scope = await trainerScope();
    const athletes = new Map(scenario.athletes.map((athlete) => [athlete.key, athlete]));
    for (const notice of own(scenario.notices)) {
      const id = idOf("notice", notice.key);
      const page = await readNotice(scope, id);
      const athlete = athletes.get(notice.athlete);
      expect(page.content.childName).toBe(athlete?.givenName);
      const { code } = page.line.state;
      if (notice.callAskedAt) expect(code).toBe("call_requested");
      else if (notice.acknowledgedAt) expect(code).toBe("acknowledged");
      else if (notice.call) expect(code).toBe("phoned");
      else if (notice.openedAt) expect(code).toBe("opened");
      else expect(code).toBe(notice.bouncedAt ? "bounced" : "delivered");
      const call = page.way.find(({ words }) => words.startsWith("Told by phone"));
      expect(call?.detail ?? null).toBe(notice.call?.words ?? null);
      const [stored] = await read(scope, (tx) =>
        tx
          .select({ hash: notices.answerHash })
          .from(notices)
          .where(and(eq(notices.organisationId, scope.organisationId), eq(notices.id, id))),
      );
      const answer = answerText(id, athlete?.dateOfBirth ?? "");
      expect(stored?.hash).toBe(keyedHash(masterKey(), "notice answer", answer));
    }
  });
});
