import { beforeAll, describe, expect, it } from "vitest";
import {
  organisationSchema,
  seasonSchema,
  teamSchema,
  venueSchema,
} from "~/features/accounts/settings.schema";
import {
  archiveTeam,
  editOrganisation,
  readOrganisation,
  readSeasons,
  readTeams,
  readVenues,
  saveSeason,
  saveTeam,
  saveVenue,
} from "~/features/accounts/settings.server";
import { makeClub } from "../../harness";

type Club = Awaited<ReturnType<typeof makeClub>>;
let club: Club;
let elsewhere: Club;
const absent = { status: 404 };
const taken = (field: string, words: string) => ({
  status: 409,
  fields: { [field]: [expect.stringContaining(words)] },
});

beforeAll(async () => {
  club = await makeClub();
  elsewhere = await makeClub();
});

describe("seasons", () => {
  const season = (name: string, startsOn: string, endsOn: string) =>
    seasonSchema.parse({ name, startsOn, endsOn });

  it("share no day, and say with which one they would", async () => {
    const { admin } = club.scopes;
    await saveSeason(admin, null, season("2031/32", "1 8 2031", "30 6 2032"));
    for (const [from, to] of [
      ["30 6 2032", "30 6 2033"],
      ["1 1 2031", "1 8 2031"],
      ["1 9 2031", "1 10 2031"],
      ["1 1 2031", "1 1 2033"],
    ] as const)
      await expect(saveSeason(admin, null, season("Another", from, to))).rejects.toMatchObject(
        taken("startsOn", "2031/32"),
      );
    await saveSeason(admin, null, season("2032/33", "1 7 2032", "30 6 2033"));
    await expect(saveSeason(admin, null, season("2031/32", "1 1 2040", "1 2 2040"))).rejects.toMatchObject(
      taken("name", "name"),
    );
  });

  it("may be changed within their own days, not into another's", async () => {
    const { admin } = club.scopes;
    await saveSeason(admin, null, season("2041/42", "1 8 2041", "30 6 2042"));
    await saveSeason(admin, null, season("2042/43", "1 8 2042", "30 6 2043"));
    const id = (await readSeasons(admin)).find(({ name }) => name === "2041/42")?.id ?? "";
    await saveSeason(admin, id, season("2041/42", "1 8 2041", "31 7 2042"));
    await expect(saveSeason(admin, id, season("2041/42", "1 8 2041", "1 8 2042"))).rejects.toMatchObject(
      taken("startsOn", "2042/43"),
    );
    await expect(
      saveSeason(admin, elsewhere.season.id, season("Foreign", "1 8 2061", "1 6 2062")),
    ).rejects.toMatchObject(absent);
  });
});

describe("teams", () => {
  const team = (name: string) => teamSchema.parse({ name, sport: "soccer", sex: "girls", underAge: "15" });

  it("differ by more than case, accents, signs and spaces", async () => {
    const { admin } = club.scopes;
    const id = await saveTeam(admin, null, team("Mädchen U15 A"));
    for (const name of ["madchen u15 a", "MÄDCHEN  U15-A", " Mädchen U15 (A) "])
      await expect(saveTeam(admin, null, team(name))).rejects.toMatchObject(taken("name", "Mädchen U15 A"));
    await saveTeam(admin, id, team("MÄDCHEN U15 A"));
    await expect(saveTeam(admin, club.team.id, team("madchen u15 a"))).rejects.toMatchObject(
      taken("name", "MÄDCHEN U15 A"),
    );
    await expect(saveTeam(elsewhere.scopes.admin, null, team("Mädchen U15 A"))).resolves.toBeTypeOf("string");
  });

  it("are changed and archived by their own administrator", async () => {
    const { admin, trainer } = club.scopes;
    await expect(saveTeam(admin, elsewhere.team.id, team("Taken over"))).rejects.toMatchObject(absent);
    await expect(archiveTeam(admin, elsewhere.team.id, true)).rejects.toMatchObject(absent);
    expect(() => saveTeam(trainer, null, team("No"))).toThrow(/role/);
    await archiveTeam(admin, club.otherTeam.id, true);
    const stored = (await readTeams(trainer)).find(({ id }) => id === club.otherTeam.id);
    expect(stored?.archivedAt).toBeInstanceOf(Date);
    await archiveTeam(admin, club.otherTeam.id, false);
    expect(() => readTeams(club.scopes.coach)).toThrow(/role/);
  });
});

it("keeps one venue of a name", async () => {
  const { admin } = club.scopes;
  await saveVenue(admin, null, venueSchema.parse({ name: "Mill Lane", defibrillator: "Pavilion door" }));
  await expect(saveVenue(admin, null, venueSchema.parse({ name: "Mill Lane" }))).rejects.toMatchObject(
    taken("name", "venue"),
  );
  const id = (await readVenues(admin)).find(({ name }) => name === "Mill Lane")?.id ?? "";
  await saveVenue(admin, id, venueSchema.parse({ name: "Mill Lane", surface: "natural_grass" }));
  await expect(
    saveVenue(elsewhere.scopes.admin, id, venueSchema.parse({ name: "Mill Lane" })),
  ).rejects.toMatchObject(absent);
});

it("refuses the slower of two who change the settings, and keeps what the faster saved", async () => {
  const { admin } = club.scopes;
  const before = await readOrganisation(admin);
  const input = (name: string) =>
    organisationSchema.parse({
      ...before,
      name,
      phoneHours: "",
      ageBands: before.ageBands.map(({ label }) => label).join("\n"),
    });
  await editOrganisation(admin, before.version, input("Saltings Faster"));
  await expect(editOrganisation(admin, before.version, input("Saltings Slower"))).rejects.toMatchObject({
    status: 409,
    message: expect.stringContaining("still here"),
  });
  expect((await readOrganisation(admin)).name).toBe("Saltings Faster");
  expect(() => editOrganisation(club.scopes.lead, 1, input("Lead"))).toThrow(/role/);
});
