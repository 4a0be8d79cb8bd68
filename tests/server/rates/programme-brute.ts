import { daysLost, type World } from "./brute-force";
import type { WarmUpPlan } from "./programme-club";

/** The programme counted one participation and one injury at a time, with none of the application's code. */

export type Wanted = {
  area: string;
  timeLoss: boolean;
  withoutContact: boolean;
  kinds: string[];
  teamId?: string;
  sex?: string;
  sport?: string;
};

export type Cell = { teamId: string; kind: string; group: string; events: number; aes: number };
type Session = World["plan"]["sessions"][number];

const inMinutes = (day: string, time: string) => Date.parse(`${day}T${time.slice(0, 5)}:00Z`) / 60_000;

export function programmeByHand(world: World, warm: WarmUpPlan, wanted: Wanted) {
  const { plan, today } = world;
  const { from } = plan.season;
  const [to = today] = [plan.season.to, today].sort();
  const isHeld = (s: Session) =>
    ["held", "abandoned"].includes(s.state) && ["training", "match"].includes(s.kind);
  const isCounted = (s: Session) =>
    isHeld(s) && s.exposureGrade === "recorded" && s.day >= from && s.day <= to;
  const sessions = new Map(plan.sessions.map((s) => [s.id, s]));
  const isOpen = (s: Session, day = s.day) => {
    const start = warm.starts.get(s.teamId);
    return start !== undefined && day >= start;
  };
  const classOf = (sessionId: string, athleteId: string) => {
    const record = warm.records.get(sessionId);
    if (!record) return "not_recorded";
    return record.outcome !== "skipped" && record.athleteIds.has(athleteId) ? "warmed_up" : "not_warmed_up";
  };
  const exposed = plan.parts.filter(({ sessionId, presence, minutes }) => {
    const session = sessions.get(sessionId);
    return session && isCounted(session) && presence === "took_part" && minutes > 0;
  });
  /** The athlete's days before one: how many of them are known, and warmed up. */
  const historyBefore = (athleteId: string, day: string) => {
    let [known, done] = [0, 0];
    for (const part of exposed) {
      const session = sessions.get(part.sessionId) as Session;
      if (part.athleteId !== athleteId || session.day >= day || !isOpen(session)) continue;
      const found = classOf(part.sessionId, athleteId);
      if (found !== "not_recorded") known += 1;
      if (found === "warmed_up") done += 1;
    }
    return { known, done };
  };
  const isWanted = (athleteId: string, { teamId, kind }: Session) =>
    wanted.kinds.includes(kind) &&
    (!wanted.teamId || teamId === wanted.teamId) &&
    (!wanted.sex || plan.athletes.find(({ id }) => id === athleteId)?.sex === wanted.sex) &&
    (!wanted.sport || plan.teams.find(({ id }) => id === teamId)?.sport === wanted.sport);

  const asked = exposed
    .filter(({ athleteId, sessionId }) => isWanted(athleteId, sessions.get(sessionId) as Session))
    .map(({ athleteId, sessionId }) => {
      const session = sessions.get(sessionId) as Session;
      return { session, group: classOf(sessionId, athleteId), ...historyBefore(athleteId, session.day) };
    });
  const inside = asked.filter(({ session }) => isOpen(session));
  const shares = inside.filter(({ known }) => known >= 5).map(({ known, done }) => done / known);
  const cuts = cutsOf(shares);
  const thirdOf = ({ known, done }: { known: number; done: number }) => {
    if (known < 5) return "early";
    if (done / known <= cuts[0]) return "lowest";
    return done / known >= cuts[1] ? "highest" : "middle";
  };

  const classes = new Map<string, Cell>();
  const thirds = new Map<string, Cell>();
  const add = (into: Map<string, Cell>, session: Session, group: string, what: "events" | "aes") => {
    const key = `${session.teamId} ${session.kind} ${group}`;
    const cell = into.get(key) ?? { teamId: session.teamId, kind: session.kind, group, events: 0, aes: 0 };
    cell[what] += 1;
    into.set(key, cell);
  };
  for (const each of inside) {
    add(classes, each.session, each.group, "aes");
    add(thirds, each.session, thirdOf(each), "aes");
  }
  const left = { outside: 0, noParticipations: 0 };
  const corners = { during: 0, late: 0, unrecordedButSaid: 0, secondTeam: 0, otherAnswer: 0 };
  let counted = 0;
  for (const injury of plan.injuries) {
    const session = sessions.get(injury.sessionId ?? "");
    if (!session || !isHeld(session) || session.day < from || session.day > to) continue;
    if (injury.withdrawn || injury.outsideSport || injury.subsequence === "exacerbation") continue;
    if (injury.onset !== "sudden" && injury.onset !== "sudden_repetitive") continue;
    if (wanted.area !== "any" && injury.bodyArea !== wanted.area) continue;
    const contact = injury.contact ?? "";
    if (wanted.withoutContact && contact !== "non_contact" && !contact.startsWith("indirect")) continue;
    if (wanted.timeLoss && daysLost(world, injury.injuryId, injury.onsetDay) < 1) continue;
    if (!isWanted(injury.athleteId, session) || !hasAes(world, session)) continue;
    counted += 1;
    if (session.exposureGrade !== "recorded") {
      left.noParticipations += 1;
      continue;
    }
    if (!isOpen(session)) {
      left.outside += 1;
      continue;
    }
    const record = warm.records.get(session.id);
    let group: string = classOf(session.id, injury.athleteId);
    if (group === "warmed_up" && injury.onsetTime && session.startTime) {
      const over = inMinutes(session.day, session.startTime) + (record?.minutes ?? 15);
      if (inMinutes(injury.onsetDay, injury.onsetTime) < over) {
        group = "not_warmed_up";
        corners.during += 1;
      }
    } else if (group === "not_warmed_up" && record?.outcome !== "skipped") corners.late += 1;
    const own = injury.warmedUp ?? null;
    if (own !== null && group === "not_recorded") corners.unrecordedButSaid += 1;
    if (own !== null && group !== "not_recorded") {
      const said = own ? "warmed_up" : "not_warmed_up";
      if (said !== group) corners.otherAnswer += 1;
      group = said;
    }
    const teams = new Set(
      exposed
        .filter(({ athleteId }) => athleteId === injury.athleteId)
        .map(({ sessionId }) => sessions.get(sessionId)?.teamId),
    );
    if (teams.size > 1) corners.secondTeam += 1;
    add(classes, session, group, "events");
    add(thirds, session, thirdOf(historyBefore(injury.athleteId, session.day)), "events");
  }
  const outside = (why: (start: string | undefined) => boolean) =>
    asked.filter(({ session }) => !isOpen(session) && why(warm.starts.get(session.teamId))).length;
  return {
    counted,
    classes: [...classes.values()],
    thirds: [...thirds.values()],
    cuts,
    left,
    corners,
    beforeStart: outside((start) => start !== undefined),
    noProgramme: outside((start) => start === undefined),
  };
}

/** Whether a session has athlete-exposures at all: a headcount has, an estimate has not. */
function hasAes({ plan }: World, session: Session) {
  if (session.exposureGrade === "headcount")
    return (session.headcount ?? 0) > 0 && (session.headcountMinutes ?? 0) > 0;
  if (session.exposureGrade !== "recorded") return false;
  return plan.parts.some(
    ({ sessionId, presence, minutes }) => sessionId === session.id && presence === "took_part" && minutes > 0,
  );
}

/** Thirds by sorting and interpolating, as a spreadsheet does. */
function cutsOf(values: readonly number[]): [number, number] {
  const sorted = [...values].sort((a, b) => a - b);
  const at = (p: number) => {
    const place = (sorted.length - 1) * p;
    const [low = 0, high = low] = [sorted[Math.floor(place)], sorted[Math.ceil(place)]];
    return low + (high - low) * (place - Math.floor(place));
  };
  return [at(1 / 3), at(2 / 3)];
}
