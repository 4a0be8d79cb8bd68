import { upload } from "~/features/imports/imports.server";
import {
  type makeClub,
  makeCoachReport,
  makeGuardian,
  makeInjury,
  makeInvitation,
  makeNotice,
  makeSession,
} from "../../harness";

export type Club = Awaited<ReturnType<typeof makeClub>>;
/** What stands for each parameter of a path. */
export type Parameters = Record<string, string>;

/** A club with one record of each kind that an address can name, about one athlete of one team. */
export async function recordsOf(club: Club, team = club.team, athlete = club.athlete): Promise<Parameters> {
  const { staff, organisation } = club;
  const session = await makeSession(staff, { teamId: team.id, minutes: { [athlete.id]: 90 } });
  const injury = await makeInjury(staff, {
    athleteId: athlete.id,
    sessionId: session.id,
    unavailableFrom: staff.today,
  });
  const report = await makeCoachReport(staff, { athleteId: athlete.id });
  const guardian = await makeGuardian(staff, { athleteIds: [athlete.id] });
  const told = await makeNotice(staff, {
    injuryId: injury.id,
    athleteId: athlete.id,
    guardianId: guardian.id,
  });
  const file = new File(["First name,Last name\nIola,Penhaligon\n"], "roster.csv");
  const imported = await upload(club.scopes.trainer, "roster", file);
  const invitation = await makeInvitation(organisation, { email: "new@example.org", roles: ["coach"] });
  return {
    organisation: organisation.slug,
    organisationId: organisation.id,
    token: invitation.part,
    familyToken: told.part,
    athlete: athlete.id,
    session: session.id,
    injury: injury.id,
    report: report.id,
    notice: told.notice.id,
    import: imported.id,
    kind: "roster",
    view: "coverage",
    table: "teams",
  };
}

/** A pattern with its parameters filled in. */
export function fill(pattern: string, parameters: Parameters): string {
  const named = pattern.startsWith("/families/") ? pattern.replace(":token", ":familyToken") : pattern;
  return named.replace(/:(\w+)/g, (_, name: string) => {
    const value = parameters[name];
    if (value === undefined) throw new Error(`Nothing stands for :${name} of ${pattern}.`);
    return value;
  });
}

/** The parameters of a pattern that name a record of an organisation. */
export const recordNames = (pattern: string) =>
  [...pattern.matchAll(/:(athlete|session|injury|report|notice|import)\b/g)].map((match) => String(match[1]));
