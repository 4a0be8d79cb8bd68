import type postgres from "postgres";
import { foundOrganisation } from "~/features/accounts/founding.server";
import { clinicalRoles } from "~/features/accounts/permissions";
import { instantOf } from "~/platform/clock";
import { masterKey } from "~/platform/crypto/keys.server";
import { find, type OwnScenario } from "./loading";
import { demoOrganisationId } from "./state";

/**
 * Founds the organisation with its members, in one transaction of the maintenance role: what the operator's command
 * and the accepted invitations leave behind. The lead confirms the athletic trainers.
 */
export async function foundDemoOrganisation(
  client: postgres.Sql,
  own: OwnScenario,
  people: ReadonlyMap<string, string>,
) {
  const { key: slug, name, kind, timeZone } = own.organisation;
  const organisationId = demoOrganisationId(slug);
  const staff = own.memberships.map((membership) => {
    const person = own.people.find((each) => each.key === membership.person);
    if (!person) throw new RangeError(`The scenario has no person "${membership.person}".`);
    return { ...membership, details: person, personId: find(people, membership.person) };
  });
  const personOf = (role: string) => staff.find((each) => each.role === role);
  const trainer = personOf("trainer");
  const admin = personOf("admin")?.personId ?? null;
  const lead = personOf("lead")?.personId ?? null;
  const since = instantOf(timeZone, own.seasons[0]?.from ?? own.today, "09:00");
  const confirmedBy = ({ role, personId }: (typeof staff)[number]) =>
    clinicalRoles.includes(role) && personId !== lead ? lead : null;
  await client.begin(async (sql) => {
    await foundOrganisation(sql, masterKey(), {
      organisationId,
      slug,
      name,
      kind,
      timeZone,
      phone: trainer?.details.phone ?? "",
      phoneHours: "weekdays 9:00 to 17:00, and during sessions",
    });
    await sql`insert into memberships ${sql(
      staff.map(({ details, personId, teams }) => ({
        organisation_id: organisationId,
        person_id: personId,
        display_name: `${details.givenName} ${details.familyName}`,
        email: details.email,
        all_teams: teams === "all",
        created_at: since,
      })),
    )}`;
    await sql`insert into membership_roles ${sql(
      staff.map((each) => ({
        organisation_id: organisationId,
        person_id: each.personId,
        role: each.role,
        granted_by: each.personId === admin ? null : admin,
        granted_at: since,
        confirmed_by: confirmedBy(each),
        confirmed_at: clinicalRoles.includes(each.role) ? since : null,
      })),
    )}`;
  });
}
