import { describe, expect, it } from "vitest";
import { incidenceOf } from "~/features/rates/rates.server";
import { rollUpMarked } from "~/features/rates/rollups/rollups.server";
import { seasonSoFar } from "~/features/rates/season-so-far.server";
import { textOf, writeSoFar } from "~/features/rates/sentence";
import { loadRates } from "~/features/rates/view.server";
import { makeClub, makeOrganisation, makePerson, makeSeason, memberScope, staffScope } from "../../harness";
import { planClub, plantClub } from "./generated-club";

const address = new URL("http://localhost/club/rates");

describe("the season so far", () => {
  it("is the total of the incidence page, before the roll-ups are made and after", async () => {
    const organisation = await makeOrganisation();
    const staff = staffScope(organisation);
    const plan = planClub(3, staff.today);
    await makeSeason(staff, { startsOn: plan.season.from, endsOn: plan.season.to, name: "2026/27" });
    await plantClub(staff, plan);
    const [team] = plan.teams;
    for (const teams of [undefined, [team?.id ?? ""]]) {
      const person = await makePerson(organisation, {
        roles: [teams ? "trainer" : "lead"],
        ...(teams ? { teams } : {}),
      });
      const scope = await memberScope(person, organisation);
      const { data } = await loadRates(scope, address, incidenceOf);
      if (!data) throw new Error("a season is there");
      const expected = textOf(writeSoFar(data.rates.total, "2026/27"));
      expect(expected).toMatch(
        /^Season 2026\/27 so far: \d+ injuries with time loss in [\d,]+ athlete-exposures, /,
      );
      expect(textOf((await seasonSoFar(scope)) ?? [])).toBe(expected);
      await rollUpMarked();
      expect(textOf((await seasonSoFar(scope)) ?? [])).toBe(expected);
    }
  });

  it("is nobody's outside the clinical roles, and nothing without a season", async () => {
    const { scopes } = await makeClub();
    expect(await seasonSoFar(scopes.coach)).toBeNull();
    expect(await seasonSoFar(scopes.admin)).toBeNull();
    expect(textOf((await seasonSoFar(scopes.lead)) ?? [])).toContain("no athlete-exposures");
    const organisation = await makeOrganisation();
    const lead = await memberScope(await makePerson(organisation, { roles: ["lead"] }), organisation);
    expect(await seasonSoFar(lead)).toBeNull();
  });
});
