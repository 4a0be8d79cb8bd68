import { randomUUID } from "node:crypto";
import { readFileSync } from "node:fs";
import Papa from "papaparse";
import { describe, expect, it } from "vitest";
import { referenceNameOf } from "~/features/rates/picture";
import { ratesQuery } from "~/features/rates/rates.schema";
import { fixedTablesOf, incidenceOf } from "~/features/rates/rates.server";
import { incidenceJson } from "~/features/rates/rates-json";
import { openView } from "~/features/rates/view.server";
import { addDays, weekStart } from "~/platform/clock";
import { incidenceRate } from "~/statistics";
import { read, type Scope, write } from "~db/client.server";
import { athletes, noInjuryWeeks, participations, sessions } from "~db/schema";
import {
  makeAthlete,
  makeClub,
  makeInjury,
  makeOrganisation,
  makePerson,
  makeSeason,
  makeSession,
  makeTeam,
  memberScope,
  staffScope,
} from "../../harness";

const filters = ratesQuery.parse({});
const address = (search = "") => new URL(`http://localhost/club/rates${search}`);
const incidence = (scope: Scope, search = "", given = filters) =>
  read(scope, async (tx) => {
    const view = await openView(tx, address(search), given);
    return {
      view,
      ...(view
        ? await incidenceOf(tx, view)
        : { rates: null, club: null, isPart: false, reportedWeeks: null }),
    };
  });

describe("the exposure by athlete of the examples", () => {
  it("is 454 athlete-exposures and the file's own hours", async () => {
    const file = readFileSync("imports/exposure/samples/exposure-by-athlete.csv", "utf8");
    const { data } = Papa.parse<Record<"date" | "start" | "team" | "kind" | "number" | "minutes", string>>(
      file,
      {
        header: true,
        skipEmptyLines: true,
      },
    );
    const organisation = await makeOrganisation();
    const staff = staffScope(organisation);
    await makeSeason(staff, { startsOn: "2026-08-01", endsOn: "2027-06-30" });
    const org = { organisationId: organisation.id };
    const teamIds = new Map<string, string>();
    for (const name of new Set(data.map(({ team }) => team)))
      teamIds.set(name, (await makeTeam(staff, { name, sex: "girls" })).id);
    const athleteIds = new Map(
      [...new Set(data.map(({ number }) => number))].map((number) => [number, randomUUID()]),
    );
    const sessionKey = (row: (typeof data)[number]) => `${row.date} ${row.start} ${row.team} ${row.kind}`;
    const held = new Map(data.map((row) => [sessionKey(row), { row, id: randomUUID() }]));
    await write(staff, async (tx) => {
      await tx.insert(athletes).values(
        [...athleteIds].map(([number, id]) => ({
          ...org,
          id,
          number,
          givenName: "A",
          familyName: number,
          nameKey: number,
        })),
      );
      await tx.insert(sessions).values(
        [...held.values()].map(({ row, id }) => ({
          ...org,
          id,
          teamId: teamIds.get(row.team) ?? "",
          day: row.date,
          startTime: row.start,
          kind: row.kind,
          state: "held",
          exposureGrade: "recorded",
        })),
      );
      await tx.insert(participations).values(
        data.map((row) => ({
          ...org,
          sessionId: held.get(sessionKey(row))?.id ?? "",
          athleteId: athleteIds.get(row.number) ?? "",
          presence: "took_part",
          minutes: Number(row.minutes),
        })),
      );
    });
    const scope = {
      ...(await memberScope(await makePerson(organisation, { roles: ["lead"] }), organisation)),
      today: "2027-07-01",
    };
    // Nobody has said yet that nobody was hurt: that exposure has no numerator.
    const silent = await incidence(scope);
    expect(silent.rates).toMatchObject({ total: { denominator: 0, rate: null }, silentExposure: 454 });
    const weeks = new Map(
      [...held.values()].map(({ row }) => {
        const [teamId, week] = [teamIds.get(row.team) ?? "", weekStart(row.date)];
        return [`${teamId} ${week}`, { ...org, teamId, weekStart: week }];
      }),
    );
    await write(staff, (tx) => tx.insert(noInjuryWeeks).values([...weeks.values()]));
    const { rates } = await incidence(scope);
    expect(data).toHaveLength(454);
    expect(rates?.total.denominator).toBe(454);
    expect(rates?.total.exposure?.aes).toEqual({ recorded: 454, headcount: 0, estimated: 0 });
    expect(rates?.total.exposure?.hours.recorded).toBeCloseTo(
      data.reduce((sum, { minutes }) => sum + Number(minutes), 0) / 60,
      8,
    );
    expect(rates?.coverage).toMatchObject({ share: 1, state: "good" });
    expect(rates?.rows.map(({ key }) => key)).toEqual(["not_stated unknown"]);
  });
});

describe("an organisation with nothing yet", () => {
  it("has no rate without a season, and a dash with its reason in an empty season", async () => {
    const organisation = await makeOrganisation();
    const lead = await makePerson(organisation, { roles: ["lead"] });
    const scope = await memberScope(lead, organisation);
    expect(await incidence(scope)).toMatchObject({ view: null, rates: null });
    await makeSeason(staffScope(organisation));
    const empty = await incidence(scope);
    expect(empty.rates?.total).toMatchObject({ injuries: 0, rate: null, reason: "no athlete-exposures" });
    const { view, rates, club, isPart, reportedWeeks } = empty;
    if (!rates || !reportedWeeks) throw new Error("a season is there");
    const json = JSON.stringify(incidenceJson(view, { rates, club, isPart, reportedWeeks }, filters));
    expect(json).not.toMatch(/NaN|Infinity/);
    expect(JSON.parse(json)).toMatchObject({ groups: [], total: { rate: null }, coverage: { share: null } });
    const admin = await memberScope(await makePerson(organisation, { roles: ["admin"] }), organisation);
    const { fixed } = await fixedTablesOf(admin, address());
    expect(fixed?.tables.map(({ rows }) => rows)).toEqual([[], []]);
  });
});

/** Teams with sessions: the first with six injured of eight, the second with two of six, a third with one of five. */
async function makeInjuredClub({ third = false } = {}) {
  const club = await makeClub();
  const { staff, team, otherTeam } = club;
  const day = addDays(staff.today, -40);
  for (const { teamId, sex, size, hurt } of [
    { teamId: team.id, sex: "female", size: 8, hurt: 6 },
    { teamId: otherTeam.id, sex: "male", size: 6, hurt: 2 },
    ...(third ? [{ teamId: (await makeTeam(staff)).id, sex: "male", size: 5, hurt: 1 }] : []),
  ]) {
    const ids: string[] = [];
    for (let n = 0; n < size; n++) ids.push((await makeAthlete(staff, { teamId, sex })).id);
    const session = await makeSession(staff, {
      teamId,
      day,
      minutes: Object.fromEntries(ids.map((id) => [id, 90])),
    });
    for (const athleteId of ids.slice(0, hurt))
      await makeInjury(staff, {
        athleteId,
        sessionId: session.id,
        onsetDay: day,
        unavailableFrom: addDays(day, 1),
      });
  }
  return club;
}

describe("who sees what", () => {
  it("gives a trainer of listed teams those teams and the club's total", async () => {
    const club = await makeInjuredClub({ third: true });
    const own = await incidence(club.scopes.trainer, "", { ...filters, by: "team" });
    expect(own.rates?.rows.map(({ key }) => key)).toEqual([club.team.id]);
    expect(own.rates?.total).toMatchObject({ injuries: 6, denominator: 8 });
    expect(own.club).toMatchObject({ injuries: 9, denominator: 19 });
    expect(own.club?.rate).toEqual(incidenceRate({ events: 9, exposure: 19 }));
    await expect(incidence(club.scopes.trainer, `?team=${club.otherTeam.id}`)).rejects.toThrow(/not found/);
    const whole = await incidence(club.scopes.lead, "", { ...filters, by: "team" });
    expect(whole.club).toBeNull();
    // What stands as the yardstick in the picture goes by its own name.
    expect([own.isPart, whole.isPart]).toEqual([true, false]);
    const named = ({ isPart, club: total }: typeof own) =>
      referenceNameOf({ isPart, club: total }, "My teams");
    expect([named(own), named(whole), named({ ...own, club: null })]).toEqual([
      "all teams",
      "all teams",
      "My teams",
    ]);
    expect(whole.rates?.total).toMatchObject({ injuries: 9, denominator: 19 });
  });

  it("gives no total from which a single other team's injuries could be taken", async () => {
    const two = await makeInjuredClub();
    expect(await incidence(two.scopes.trainer)).toMatchObject({
      rates: { total: { injuries: 6 } },
      club: null,
    });
    const three = await makeInjuredClub({ third: true });
    for (const narrowed of [{ sex: "female" }, { sport: "soccer" }, { age: "unknown" }] as const)
      expect((await incidence(three.scopes.trainer, "", { ...filters, ...narrowed })).club).toBeNull();
    // Who covers every team keeps the whole beside a part of it.
    const part = await incidence(two.scopes.lead, `?team=${two.team.id}`, { ...filters, sex: "male" });
    expect(part.club).toMatchObject({ injuries: 2 });
  });

  it("counts for the administrator, whose own rights do not reach injuries, and hides small cells", async () => {
    const club = await makeInjuredClub();
    const direct = await incidence(club.scopes.admin);
    expect(direct.rates?.total.injuries).toBe(0);
    const { fixed } = await fixedTablesOf(club.scopes.admin, address(`?team=${club.otherTeam.id}&by=team`));
    const [bySex, byAge] = fixed?.tables ?? [];
    expect(bySex?.total).toMatchObject({ injuries: 8 });
    expect(bySex?.rows.map(({ injuries, exposure, rate }) => [injuries, exposure, rate])).toEqual([
      [null, null, null],
      [null, null, null],
    ]);
    // One band alone is the total.
    expect(byAge?.rows.map(({ injuries }) => injuries)).toEqual([8]);
  });

  it("keeps another organisation's records out", async () => {
    await makeInjuredClub();
    const other = await makeClub();
    const { rates } = await incidence(other.scopes.lead);
    expect(rates?.total).toMatchObject({ injuries: 0, denominator: 0, rate: null });
  });
});
