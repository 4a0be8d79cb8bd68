import { type Candidate, playSession, type Turn } from "./attendance.ts";
import type { AvailabilityBook } from "./availability.ts";
import { addDays, daysBetween } from "./days.ts";
import { drawInjury, makeInjury } from "./injuries.ts";
import { openStream, type Random } from "./random.ts";
import type { Member } from "./rosters.ts";
import type { Fixture } from "./schedule.ts";
import type { Day, Injury, Participation, RosterEntry, Session, WarmUp } from "./types.ts";
import { holdWarmUp, type WarmUpHeld } from "./warm-ups.ts";

export type Played = {
  sessions: Session[];
  participations: Participation[];
  warmUps: WarmUp[];
  /** In order of onset, with their whole course. */
  injuries: Injury[];
  warmedUpWithoutRecord: string[];
};

export type World = {
  seed: string;
  today: Day;
  members: readonly Member[];
  roster: readonly RosterEntry[];
  /** In order of day and start. */
  fixtures: readonly Fixture[];
  /** Holds illnesses and injuries outside sport already; injuries of play are added on the way. */
  availability: AvailabilityBook;
  injuriesBefore: readonly Injury[];
  staffOf: (team: string) => { coach: string; trainer: string };
};

/** How far ahead sessions are planned, in days. */
const PLANNED_AHEAD = 14;

/**
 * Plays every fixture before today in order, so that an injury of one day decides who takes part on the next.
 * Each fixture has a random stream of its own: another today adds or removes days and changes none.
 */
export function playFixtures(world: World): Played {
  const played: Played = {
    sessions: [],
    participations: [],
    warmUps: [],
    injuries: [],
    warmedUpWithoutRecord: [],
  };
  const lastTookPart = new Map<string, Day>();
  const reliability = new Map(
    world.members.map((member) => {
      const random = openStream(world.seed, `reliability ${member.athlete.key}`);
      return [member.athlete.key, 0.82 + 0.16 * random.next()] as const;
    }),
  );
  const squads = groupByTeam(world);
  for (const fixture of world.fixtures) {
    if (fixture.day > addDays(world.today, PLANNED_AHEAD)) continue;
    const random = openStream(world.seed, `session ${fixture.key}`);
    const fate = drawFate(random, fixture);
    if (fixture.day >= world.today || fate.status === "planned" || fate.status === "cancelled") {
      const status = fixture.day >= world.today ? "planned" : fate.status;
      played.sessions.push(
        toSession(fixture, { status, actualMinutes: null, grade: "none", headcount: null }),
      );
      continue;
    }
    const candidates = (squads.get(fixture.plan.key) ?? [])
      .filter((each) => each.from <= fixture.day && each.to >= fixture.day)
      .filter((each) => !each.trainsOnly || fixture.kind === "training")
      .map(({ member }): Candidate => {
        const { key } = member.athlete;
        return {
          member,
          availability: world.availability.on(key, fixture.day),
          reliability: reliability.get(key) ?? 1,
          isBusy: lastTookPart.get(key) === fixture.day,
        };
      });
    const turns = playSession(random, fixture, fate.actualMinutes, candidates);
    for (const turn of turns) {
      if (turn.presence === "took_part") lastTookPart.set(turn.member.athlete.key, fixture.day);
    }
    const { coach, trainer } = world.staffOf(fixture.plan.key);
    const warmUp =
      fixture.day >= fate.programmeFrom
        ? holdWarmUp(random, fixture, turns, coach)
        : { record: null, warmedUp: new Set<string>(), tookPart: new Set<string>() };
    hurt(random, world, played, fixture, turns, warmUp, trainer);
    record(played, fixture, fate, turns, warmUp);
  }
  return played;
}

type Squad = { member: Member; from: Day; to: Day; trainsOnly: boolean }[];

function groupByTeam(world: World): Map<string, Squad> {
  const members = new Map(world.members.map((member) => [member.athlete.key, member]));
  const squads = new Map<string, Squad>();
  const add = (team: string, place: Squad[number]) => {
    const squad = squads.get(team);
    if (squad) squad.push(place);
    else squads.set(team, [place]);
  };
  for (const { athlete, team, from, to } of world.roster) {
    const member = members.get(athlete);
    if (member) add(team, { member, from, to: to ?? "9999-12-31", trainsOnly: false });
  }
  for (const member of world.members) {
    if (member.visits === null) continue;
    add(member.visits, { member, from: member.joinedOn, to: addDays(member.joinedOn, 13), trainsOnly: true });
  }
  return squads;
}

type Fate = Pick<Session, "status" | "grade"> & { actualMinutes: number; programmeFrom: Day };

function drawFate(random: Random, fixture: Fixture): Fate {
  const { plan, kind, plannedMinutes } = fixture;
  const isOutdoor = plan.sport === "soccer" && kind !== "strength";
  const isWinter = fixture.day.slice(5) >= "12-01" || fixture.day.slice(5) < "03-01";
  const isCancelled = random.chance(isOutdoor && isWinter ? 0.07 : 0.02);
  const isAbandoned = random.chance(kind === "match" && isOutdoor ? 0.012 : 0.002);
  const isForgotten = random.chance(0.01);
  const isMissing = random.chance(0.03);
  const isEstimated = kind === "match" && random.chance(0.5);
  const extra = kind === "match" ? 0 : random.pick([-10, -5, 0, 0, 0, 0, 5, 10]);
  const stoppedAt = random.int(15, Math.max(15, plannedMinutes - 15));
  const grade = isMissing ? (isEstimated ? "estimated" : "none") : plan.exposureHabit;
  const programmeFrom = fixture.programmeFrom;
  const whole = { grade, actualMinutes: plannedMinutes + extra, programmeFrom } as const;
  // Nobody confirmed it took place: it stays planned after its time has passed.
  if (fixture.isSilent || isForgotten) return { ...whole, status: "planned" };
  if (isCancelled) return { ...whole, status: "cancelled" };
  return isAbandoned
    ? { ...whole, status: "abandoned", actualMinutes: stoppedAt }
    : { ...whole, status: "held" };
}

function toSession(
  fixture: Fixture,
  outcome: Pick<Session, "status" | "actualMinutes" | "grade" | "headcount">,
): Session {
  const { key, plan, day, start, kind, plannedMinutes, surface, venue } = fixture;
  return {
    organisation: plan.organisation,
    key,
    team: plan.key,
    day,
    start,
    kind,
    plannedMinutes,
    surface,
    venue,
    ...outcome,
  };
}

/** Draws the injuries of a session; whoever cannot continue leaves at that minute and is unavailable at once. */
function hurt(
  random: Random,
  world: World,
  played: Played,
  fixture: Fixture,
  turns: readonly Turn[],
  warmUp: WarmUpHeld,
  trainer: string,
): void {
  for (const turn of turns) {
    if (turn.presence !== "took_part") continue;
    const { athlete } = turn.member;
    const warmedUp = warmUp.warmedUp.has(athlete.key);
    const { day, kind, plan } = fixture;
    const drawn = drawInjury(random, athlete, { day, kind, sport: plan.sport, warmedUp });
    if (!drawn) continue;
    const minute = random.int(1, turn.minutes);
    const { injury, contributions } = makeInjury(random, drawn, {
      athlete,
      day,
      start: fixture.start,
      minute: turn.cameOnAt + minute,
      session: {
        key: fixture.key,
        isMatch: kind === "match",
        surface: fixture.surface,
        warmedUp: warmUp.record ? (warmUp.tookPart.has(athlete.key) ? "yes" : "no") : "unknown",
      },
      before: [...world.injuriesBefore, ...played.injuries].filter(
        (each) => each.athlete === athlete.key && each.at.slice(0, 10) < day,
      ),
      loggedBy: trainer,
    });
    if (!injury.couldContinue) turn.minutes = minute;
    played.injuries.push(injury);
    world.availability.add(contributions);
  }
}

function record(
  played: Played,
  fixture: Fixture,
  fate: Fate,
  turns: readonly Turn[],
  warmUp: WarmUpHeld,
): void {
  const tookPart = turns.filter((turn) => turn.presence === "took_part").length;
  const headcount = fate.grade === "headcount" ? tookPart : null;
  played.sessions.push(
    toSession(fixture, {
      status: fate.status,
      actualMinutes: fate.actualMinutes,
      grade: fate.grade,
      headcount,
    }),
  );
  if (warmUp.record) {
    // Late arrivals are named only where participations are.
    const notWarmedUp = fate.grade === "recorded" ? warmUp.record.notWarmedUp : [];
    played.warmUps.push({ ...warmUp.record, notWarmedUp });
  } else if (warmUp.warmedUp.size > 0) {
    played.warmedUpWithoutRecord.push(fixture.key);
  }
  if (fate.grade !== "recorded") return;
  for (const turn of turns) {
    played.participations.push({
      organisation: fixture.plan.organisation,
      session: fixture.key,
      athlete: turn.member.athlete.key,
      presence: turn.presence,
      minutes: turn.minutes,
    });
  }
}

/** Injuries at home, at school or on holiday: known to the club, never part of its rates. */
export function drawOutsideInjuries(
  seed: string,
  members: readonly Member[],
  roster: readonly RosterEntry[],
  season: { from: Day; to: Day },
  draw: (random: Random, member: Member, day: Day) => ReturnType<typeof makeInjury>,
  share: number,
): ReturnType<typeof makeInjury>[] {
  const byKey = new Map(members.map((member) => [member.athlete.key, member]));
  const entries = roster.filter((each) => each.from >= season.from && each.from <= season.to);
  const injuries: ReturnType<typeof makeInjury>[] = [];
  const seen = new Set<string>();
  for (const entry of entries) {
    const member = byKey.get(entry.athlete);
    if (!member || seen.has(entry.athlete)) continue;
    seen.add(entry.athlete);
    const random = openStream(seed, `outside ${entry.athlete} ${season.from}`);
    const day = addDays(season.from, random.int(20, daysBetween(season.from, season.to)));
    const isRostered = day >= entry.from && (entry.to === null || day <= entry.to);
    if (random.chance(share) && isRostered) injuries.push(draw(random, member, day));
  }
  return injuries;
}
