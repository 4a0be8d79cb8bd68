import { addDays, ageOnDay, daysBetween, momentAfter } from "./days.ts";
import { openStream } from "./random.ts";
import type {
  Athlete,
  BodyArea,
  CoachReport,
  ConfirmedWeek,
  Day,
  Encounter,
  Guardian,
  Guardianship,
  Injury,
  Notice,
  Participation,
  Session,
} from "./types.ts";

type People = {
  seed: string;
  today: Day;
  staffOf: (team: string) => { coach: string; trainer: string };
};

/** A minute of the day, hours after a moment; never later than the evening before today. */
function later(moment: string, minutes: number): string {
  return momentAfter(moment.slice(0, 10), moment.slice(11), minutes);
}

const NOTICE_DAYS = 75;

/**
 * Notices of the last weeks to the guardians of minors who had to stop: most acknowledged, some opened or only
 * delivered, one bounced, one family asked for a call. The newest injury is left unsent: a task for today.
 */
export function drawNotices(
  people: People,
  athletes: readonly Athlete[],
  guardians: readonly Guardian[],
  guardianships: readonly Guardianship[],
  injuries: readonly Injury[],
): Notice[] {
  const byKey = new Map(athletes.map((athlete) => [athlete.key, athlete]));
  const guardianOf = new Map(guardians.map((guardian) => [guardian.key, guardian]));
  const told = injuries.filter((injury) => {
    const athlete = byKey.get(injury.athlete);
    const day = injury.at.slice(0, 10);
    const isRecent = daysBetween(day, people.today) <= NOTICE_DAYS;
    return (
      athlete &&
      isRecent &&
      !injury.couldContinue &&
      ageOnDay(athlete.dateOfBirth, day) < 18 &&
      !athlete.safeguardingHold
    );
  });
  const notices: Notice[] = [];
  for (const injury of told.slice(0, -1)) {
    const random = openStream(people.seed, `notice ${injury.key}`);
    const urgent = injury.suspectedConcussion || injury.signs.some((sign) => URGENT_SIGNS.includes(sign));
    for (const link of guardianships.filter((each) => each.athlete === injury.athlete && each.mayBeTold)) {
      const guardian = guardianOf.get(link.guardian);
      if (!guardian?.email || !guardian.wantsEmail) continue;
      const sentAt = later(injury.at, random.int(12, 50));
      const state = random.weighted([
        ["acknowledged", 62],
        ["opened", 16],
        ["delivered", 14],
        ["bounced", 8],
      ] as const);
      const isOpened = state === "acknowledged" || state === "opened";
      const openedAt = isOpened ? later(sentAt, random.int(4, 180)) : null;
      const asksForCall = random.chance(0.15);
      notices.push({
        organisation: injury.organisation,
        key: `${injury.key}/${guardian.key}`,
        injury: injury.key,
        athlete: injury.athlete,
        guardian: guardian.key,
        urgent,
        sentAt,
        deliveredAt: state === "bounced" ? null : later(sentAt, 1),
        openedAt,
        acknowledgedAt: openedAt && state === "acknowledged" ? later(openedAt, 2) : null,
        callAskedAt: openedAt && asksForCall ? later(openedAt, 3) : null,
        bouncedAt: state === "bounced" ? later(sentAt, 1) : null,
        call:
          urgent && link.phoneOrder === 1
            ? {
                by: injury.loggedBy,
                at: later(injury.at, 8),
                words: "Told what happened and what to watch for; collecting the athlete now.",
              }
            : null,
      });
    }
  }
  return notices.filter((notice) => notice.sentAt.slice(0, 10) < people.today);
}

const URGENT_SIGNS: readonly string[] = [
  "deformity",
  "numb",
  "cold_pale_foot",
  "open_wound",
  "locked",
  "cannot_bear_weight",
];

/** What coaches sent from the touchline when the athletic trainer was elsewhere. The last week's still wait. */
export function drawCoachReports(
  people: People,
  sessions: ReadonlyMap<string, Session>,
  injuries: readonly Injury[],
  guardianships: readonly Guardianship[],
): CoachReport[] {
  const reports: CoachReport[] = [];
  for (const injury of injuries) {
    const random = openStream(people.seed, `report ${injury.key}`);
    const session = injury.session === null ? undefined : sessions.get(injury.session);
    if (!session || !random.chance(session.venue === null ? 0.7 : 0.15)) continue;
    const first = guardianships.find((each) => each.athlete === injury.athlete && each.mayBeTold);
    const phones = random.chance(0.6);
    reports.push({
      organisation: injury.organisation,
      key: `${injury.key}/report`,
      athlete: injury.athlete,
      session: session.key,
      by: people.staffOf(session.team).coach,
      at: later(injury.at, random.int(2, 15)),
      area: injury.area,
      signs: injury.signs,
      phoned: phones && !injury.couldContinue && first ? first.guardian : null,
      injury: injury.key,
    });
  }
  return reports;
}

/** A knock reported from yesterday's sessions that no trainer has looked at: the queue of the day is never empty. */
export function drawWaitingReports(
  people: People,
  sessions: readonly Session[],
  participations: readonly Participation[],
): CoachReport[] {
  const recent = sessions.filter(
    (each) => each.grade === "recorded" && daysBetween(each.day, people.today) <= 4,
  );
  return recent.slice(-2).flatMap((session): CoachReport[] => {
    const random = openStream(people.seed, `waiting ${session.key}`);
    const there = participations.filter(
      (each) => each.session === session.key && each.presence === "took_part",
    );
    if (there.length === 0) return [];
    const { athlete, organisation } = random.pick(there);
    const area = random.pick<BodyArea>(["ankle", "thigh", "knee", "hand"]);
    const at = momentAfter(session.day, session.start, (session.actualMinutes ?? session.plannedMinutes) + 5);
    const by = people.staffOf(session.team).coach;
    const key = `${session.key}/waiting`;
    return [
      {
        organisation,
        key,
        athlete,
        session: session.key,
        by,
        at,
        area,
        signs: [],
        phoned: null,
        injury: null,
      },
    ];
  });
}

/** Taping, a look, rehabilitation: what fills a training room between injuries. */
export function drawEncounters(
  people: People,
  sessions: readonly Session[],
  participations: readonly Participation[],
): Encounter[] {
  const teams = new Map(
    sessions.map((session) => [
      session.key,
      { session, random: openStream(people.seed, `encounters ${session.key}`) },
    ]),
  );
  const encounters: Encounter[] = [];
  for (const { organisation, athlete, session: key, presence } of participations) {
    const found = teams.get(key);
    if (!found || presence === "absent") continue;
    const { session, random } = found;
    if (!random.chance(0.012)) continue;
    const kind =
      presence === "present_only"
        ? "rehabilitation"
        : random.pick(["assessment", "taping", "taping"] as const);
    const area = random.weighted<BodyArea>([
      ["ankle", 45],
      ["knee", 25],
      ["hand", 12],
      ["thigh", 10],
      ["shoulder", 8],
    ]);
    const at = momentAfter(session.day, session.start, -random.int(5, 40));
    encounters.push({ organisation, athlete, by: people.staffOf(session.team).trainer, at, kind, area });
  }
  return encounters;
}

/** Weeks with sessions and no injury in which someone said so; the rest read "not reported". */
export function drawConfirmedWeeks(
  people: People,
  weeks: readonly { organisation: string; team: string; monday: Day; isSilent: boolean }[],
  injuredWeeks: ReadonlySet<string>,
): ConfirmedWeek[] {
  return weeks
    .filter(({ monday, isSilent }) => !isSilent && addDays(monday, 6) < people.today)
    .filter(({ team, monday }) => !injuredWeeks.has(`${team} ${monday}`))
    .filter(({ team, monday }) => openStream(people.seed, `week ${team} ${monday}`).chance(0.94))
    .map(({ organisation, team, monday }) => ({
      organisation,
      team,
      monday,
      by: people.staffOf(team).trainer,
    }));
}
