import { eq } from "drizzle-orm";
import { beforeAll, describe, expect, it } from "vitest";
import { listInjuries } from "~/features/injuries/list-injuries.server";
import { incidenceOf } from "~/features/rates/rates.server";
import { recordsBehind } from "~/features/rates/records/records.server";
import { loadRates } from "~/features/rates/view.server";
import { addDays } from "~/platform/clock";
import { type Scope, write } from "~db/client.server";
import { athletes, auditEvents, rosterEntries } from "~db/schema";
import { makeAthlete, makeClub, makeInjury, makeSession } from "../../harness";

type Club = Awaited<ReturnType<typeof makeClub>>;
const address = (search = "") => new URL(`http://localhost/club/rates/records${search}`);

let club: Club;
let day: string;
const ids: Record<string, string> = {};

/** Three hurt in one session of the first team: one has left since, one has moved to the other team. */
beforeAll(async () => {
  club = await makeClub();
  const { staff, team, otherTeam } = club;
  day = addDays(staff.today, -30);
  for (const name of ["stays", "left", "moved"])
    ids[name] = (await makeAthlete(staff, { teamId: team.id, sex: "female" })).id;
  const minutes = Object.fromEntries(Object.values(ids).map((id) => [id, 90]));
  const session = await makeSession(staff, { teamId: team.id, day, minutes });
  for (const [name, bodyArea] of [
    ["stays", "knee"],
    ["left", "ankle"],
    ["moved", "ankle"],
  ] as const)
    await makeInjury(staff, {
      athleteId: ids[name] ?? "",
      sessionId: session.id,
      onsetDay: day,
      bodyArea,
      unavailableFrom: addDays(day, 1),
    });
  await makeInjury(staff, {
    athleteId: ids.moved ?? "",
    onsetDay: day,
    onset: "gradual",
    bodyArea: "thigh",
    unavailableFrom: addDays(day, 1),
  });
  await makeInjury(staff, { athleteId: ids.stays ?? "", sessionId: session.id, onsetDay: day });
  await write(staff, async (tx) => {
    await tx
      .update(athletes)
      .set({ archivedAt: new Date(`${addDays(day, 10)}T12:00:00Z`) })
      .where(eq(athletes.id, ids.left ?? ""));
    await tx
      .update(rosterEntries)
      .set({ toDay: addDays(day, 5) })
      .where(eq(rosterEntries.athleteId, ids.moved ?? ""));
    await tx.insert(rosterEntries).values({
      organisationId: staff.organisationId,
      id: crypto.randomUUID(),
      athleteId: ids.moved ?? "",
      teamId: otherTeam.id,
      fromDay: addDays(day, 6),
    });
  });
});

async function records(scope: Club["scopes"]["lead"], search = "") {
  const { data } = await loadRates(
    scope,
    address(search),
    async (tx, view) => ({
      records: await recordsBehind(tx, view, address(search)),
      incidence: await incidenceOf(tx, view),
    }),
    write as <T>(scope: Scope, fn: Parameters<typeof write<T>>[1]) => Promise<T>,
  );
  if (!data) throw new Error("a season is there");
  return data;
}

describe("the records behind a figure", () => {
  it("are the injuries that the figure counts, with those left out and why", async () => {
    const { records: found, incidence } = await records(club.scopes.lead);
    expect(found.injuries).toBe(incidence.rates.total.injuries);
    expect(found.lines).toHaveLength(4);
    expect(found.leftOut).toHaveLength(1);
    expect(found.leftOut[0]?.reason).toMatch(/^No time loss/);
    expect(found.exposure).toMatchObject([{ teamId: club.team.id, day, aes: 3, grade: "recorded" }]);
  });

  it("leave out nothing that belongs to sessions which were not asked for", async () => {
    const { records: found, incidence } = await records(club.scopes.lead, "?sessions=match");
    const said = incidence.rates.leftOut.reduce((sum, { count }) => sum + count, 0);
    expect(said).toBe(1);
    expect(found.leftOut).toHaveLength(said);
  });

  it("are those of one group alone", async () => {
    const { records: found } = await records(club.scopes.lead, "?by=area&group=ankle");
    expect(found).toMatchObject({ injuries: 2, group: "Ankle", leftOut: [] });
    expect(found.lines.map(({ bodyArea }) => bodyArea)).toEqual(["ankle", "ankle"]);
  });

  it("name to a trainer of one team whoever was hurt in its sessions, and nobody else who has gone", async () => {
    const { records: found } = await records(club.scopes.trainer);
    // The gradual injury names no session, and its athlete is on another team's roster now.
    expect(found.injuries).toBe(4);
    expect(found.lines).toHaveLength(3);
    expect(found.lines.map(({ bodyArea }) => bodyArea)).not.toContain("thigh");
  });

  it("leave a trace in the audit", async () => {
    await records(club.scopes.lead);
    const rows = await write(club.staff, (tx) =>
      tx.select().from(auditEvents).where(eq(auditEvents.action, "injury.list")),
    );
    expect(rows.some(({ fields }) => (fields as { purpose?: string }).purpose === "rates")).toBe(true);
  });
});

describe("an athlete who left the organisation", () => {
  it("has time loss up to that day, censored, here and on the list of injuries", async () => {
    const { records: found } = await records(club.scopes.lead, "?by=area&group=ankle");
    const left = found.lines.find(({ daysLost }) => daysLost === 10);
    expect(left).toMatchObject({ ongoing: true });
    const others = found.lines.filter((line) => line !== left);
    expect(others).toMatchObject([{ daysLost: 30, ongoing: true }]);
    const list = await listInjuries(club.scopes.lead, address());
    expect(list.lines.find(({ athleteId }) => athleteId === ids.left)).toMatchObject({
      days: 10,
      ongoing: true,
    });
  });
});
