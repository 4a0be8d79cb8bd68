import { randomUUID } from "node:crypto";
import { beforeEach, describe, expect, it } from "vitest";
import {
  changeTeams,
  confirmMember,
  endMember,
  grantRole,
  listPeople,
  removeRole,
} from "~/features/accounts/people.server";
import { resolveMemberScope } from "~/features/accounts/scope.server";
import { join, makeClub, makePerson, memberScope } from "../../harness";

type Club = Awaited<ReturnType<typeof makeClub>>;
let club: Club;
beforeEach(async () => {
  club = await makeClub();
});

const absent = { status: 404 };
const scopeNow = (person: { id: string }) => memberScope(person, club.organisation);

describe("roles", () => {
  it("count at once when they are not clinical, and after a lead's word when they are", async () => {
    const { admin, lead } = club.scopes;
    const { coach } = club.people;
    await grantRole(admin, coach.id, "admin");
    expect((await scopeNow(coach)).roles.toSorted()).toEqual(["admin", "coach"]);
    await grantRole(admin, coach.id, "trainer");
    expect(await scopeNow(coach)).toMatchObject({ unconfirmed: ["trainer"] });
    expect((await scopeNow(coach)).roles).not.toContain("trainer");
    await confirmMember(lead, coach.id);
    expect((await scopeNow(coach)).roles).toContain("trainer");
  });

  it("are confirmed by leads, never one's own, and never a stranger's", async () => {
    const { admin, lead } = club.scopes;
    const elsewhere = await makeClub();
    await grantRole(admin, club.people.lead.id, "trainer");
    expect(() => confirmMember(lead, club.people.lead.id)).toThrow(/role/);
    expect(() => confirmMember(admin, club.people.coach.id)).toThrow(/role/);
    for (const id of [randomUUID(), elsewhere.people.trainer.id])
      await expect(confirmMember(lead, id)).rejects.toMatchObject(absent);
  });

  it("are gone on the next request once removed", async () => {
    await removeRole(club.scopes.admin, club.people.trainer.id, "trainer");
    expect(await scopeNow(club.people.trainer)).toMatchObject({ roles: [], actors: [] });
  });

  it("keep the last administrator and the last confirmed lead", async () => {
    const { admin } = club.scopes;
    const { people } = club;
    const last = (text: string) => ({ status: 409, message: expect.stringContaining(text) });
    await expect(removeRole(admin, people.admin.id, "admin")).rejects.toMatchObject(
      last("last administrator"),
    );
    await expect(endMember(admin, people.admin.id)).rejects.toMatchObject(last("last administrator"));
    await expect(removeRole(admin, people.lead.id, "lead")).rejects.toMatchObject(last("last medical lead"));
    await expect(endMember(admin, people.lead.id)).rejects.toMatchObject(last("last medical lead"));
    // One who waits for confirmation does not count as another lead; one who left does not either.
    await grantRole(admin, people.trainer.id, "lead");
    const left = await makePerson(club.organisation, { roles: ["lead"] });
    await endMember(admin, left.id);
    await expect(removeRole(admin, people.lead.id, "lead")).rejects.toMatchObject(last("last medical lead"));
    await confirmMember(club.scopes.lead, people.trainer.id);
    await removeRole(admin, people.lead.id, "lead");
    await grantRole(admin, people.coach.id, "admin");
    await removeRole(admin, people.admin.id, "admin");
    expect((await scopeNow(people.admin)).roles).toEqual([]);
  });

  it("are managed by the administrator alone, among their own members", async () => {
    const elsewhere = await makeClub();
    const foreign = elsewhere.people.coach.id;
    const { admin } = club.scopes;
    await expect(grantRole(admin, foreign, "trainer")).rejects.toMatchObject(absent);
    await expect(removeRole(admin, foreign, "coach")).rejects.toMatchObject(absent);
    await expect(endMember(admin, foreign)).rejects.toMatchObject(absent);
    for (const scope of [club.scopes.lead, club.scopes.trainer, club.scopes.coach]) {
      expect(() => grantRole(scope, club.people.coach.id, "admin")).toThrow(/role/);
      expect(() => removeRole(scope, club.people.coach.id, "coach")).toThrow(/role/);
      expect(() => endMember(scope, club.people.coach.id)).toThrow(/role/);
    }
  });
});

describe("teams", () => {
  it("are replaced by what is listed, all, or none", async () => {
    const { admin } = club.scopes;
    const { coach } = club.people;
    await changeTeams(admin, coach.id, { reach: "listed", teams: [club.otherTeam.id] });
    expect((await scopeNow(coach)).teams).toEqual([club.otherTeam.id]);
    await changeTeams(admin, coach.id, { reach: "all", teams: [club.team.id] });
    expect((await scopeNow(coach)).teams).toBe("all");
    await changeTeams(admin, coach.id, { reach: "listed", teams: [] });
    expect((await scopeNow(coach)).teams).toEqual([]);
  });

  it("are the organisation's own, of a member", async () => {
    const elsewhere = await makeClub();
    const { admin, lead } = club.scopes;
    const change = (id: string, teamId: string) =>
      changeTeams(admin, id, { reach: "listed", teams: [teamId] });
    await expect(change(club.people.coach.id, elsewhere.team.id)).rejects.toMatchObject(absent);
    await expect(change(elsewhere.people.coach.id, club.team.id)).rejects.toMatchObject(absent);
    expect((await scopeNow(club.people.coach)).teams).toEqual([club.team.id]);
    expect(() => changeTeams(lead, club.people.coach.id, { reach: "all", teams: [] })).toThrow(/role/);
  });
});

describe("an ended membership", () => {
  it("opens nothing, and a later invitation gives what it says and nothing of before", async () => {
    const person = await makePerson(club.organisation, { roles: ["lead", "admin"] });
    await endMember(club.scopes.admin, person.id);
    expect(await resolveMemberScope(person.id, club.organisation.slug)).toBeUndefined();
    await join(person, club.organisation, { roles: ["coach"], teams: [club.team.id] });
    expect(await scopeNow(person)).toMatchObject({
      roles: ["coach"],
      unconfirmed: [],
      teams: [club.team.id],
    });
  });

  it("keeps the name, for what the person did", async () => {
    await endMember(club.scopes.admin, club.people.trainer.id);
    const { members } = await listPeople(club.scopes.lead);
    expect(members.find(({ personId }) => personId === club.people.trainer.id)).toMatchObject({
      displayName: club.people.trainer.name,
      endedAt: expect.any(Date),
    });
    expect(() => listPeople(club.scopes.trainer)).toThrow(/role/);
  });
});
