import type { RatesFilters } from "~/features/rates/filters";
import { addDays, weekStart } from "~/platform/clock";
import type { Plan } from "./generated-club";

/** Counts a plan by walking through it day by day and athlete by athlete, with none of the application's code. */

type Rule = { sport: string; fromAge: number; players: number; minutes: number };
type Bands = readonly { label: string; from: number; to: number | null }[];
export type World = {
  plan: Plan;
  rules: readonly Rule[];
  bands: Bands;
  today: string;
  seasonId: string;
  /** Weeks of teams in which somebody confirmed that nobody was newly hurt, by their Monday. */
  confirmed?: readonly { teamId: string; week: string }[];
  /** The day on which an athlete left the organisation. */
  left?: ReadonlyMap<string, string>;
};
type Session = Plan["sessions"][number];
type Hurt = Plan["injuries"][number];
type Share = { athleteId: string | null; aes: number; hours: number };

/** What does not depend on the view is walked through once. */
const walked = new WeakMap<World, Walk>();
type Held = { session: Session; grade: string; shares: Share[] };
type Walk = {
  held: Map<string, Held>;
  lost: Map<string, number>;
  /** Exposure of a team's week, in each unit. */
  weeks: Map<string, { aes: number; hours: number }>;
};

const weekKey = (teamId: string, day: string) => `${teamId} ${weekStart(day)}`;

const amountOf = (shares: readonly Share[], per: RatesFilters["per"]) =>
  shares.reduce((sum, share) => sum + (per === "aes" ? share.aes : share.hours), 0);

function walk(world: World): Walk {
  const known = walked.get(world);
  if (known) return known;
  const held = new Map(
    world.plan.sessions.map((session) => [session.id, { session, ...sharesOf(world, session) }]),
  );
  const lost = new Map(
    world.plan.injuries.map((each) => [each.injuryId, daysLost(world, each.injuryId, each.onsetDay)]),
  );
  const weeks: Walk["weeks"] = new Map();
  for (const { session, shares } of held.values()) {
    const week = weeks.get(weekKey(session.teamId, session.day)) ?? { aes: 0, hours: 0 };
    weeks.set(weekKey(session.teamId, session.day), {
      aes: week.aes + amountOf(shares, "aes"),
      hours: week.hours + amountOf(shares, "hours"),
    });
  }
  const made = { held, lost, weeks };
  walked.set(world, made);
  return made;
}

/** Age by walking from birthday to birthday; 29 February moves to 1 March in common years. */
function age(born: string | null, day: string) {
  if (!born || born > day) return null;
  let years = -1;
  for (let year = Number(born.slice(0, 4)); year <= Number(day.slice(0, 4)); year++) {
    const leap = new Date(Date.UTC(year, 1, 29)).getUTCMonth() === 1;
    const monthDay = born.slice(5) === "02-29" && !leap ? "03-01" : born.slice(5);
    if (`${year}-${monthDay}` <= day) years += 1;
  }
  return years;
}

const band = (bands: Bands, years: number | null) =>
  years === null
    ? "unknown"
    : (bands.find(({ from, to }) => years >= from && years <= (to ?? 999))?.label ?? "unknown");

/** The state of one reason on a day: of the changes from that day or earlier, the one entered last. */
function stateOn(plan: Plan, reasonId: string, day: string) {
  const known = plan.changes.filter((change) => change.reasonId === reasonId && change.fromDay <= day);
  return known.sort((a, b) => b.seq - a.seq)[0]?.state ?? "full";
}

function isUnavailable(plan: Plan, athleteId: string, day: string) {
  const reasons = new Set(
    plan.changes.filter((change) => change.athleteId === athleteId).map((c) => c.reasonId),
  );
  return [...reasons].some((reason) => stateOn(plan, reason, day) === "unavailable");
}

function sharesOf({ plan, rules }: World, session: Session): { grade: string; shares: Share[] } {
  const none = { grade: "none", shares: [] };
  if (session.state !== "held" && session.state !== "abandoned") return none;
  if (session.kind !== "training" && session.kind !== "match") return none;
  if (session.day < plan.season.from || session.day > plan.season.to) return none;
  if (session.exposureGrade === "recorded") {
    const parts = plan.parts.filter(
      (p) => p.sessionId === session.id && p.presence === "took_part" && p.minutes > 0,
    );
    return {
      grade: "recorded",
      shares: parts.map((p) => ({ athleteId: p.athleteId, aes: 1, hours: p.minutes / 60 })),
    };
  }
  const team = plan.teams.find(({ id }) => id === session.teamId);
  let [players, minutes] = [session.headcount ?? 0, session.headcountMinutes ?? 0];
  if (session.exposureGrade === "estimated") {
    if (session.kind !== "match") return none;
    const rule = rules
      .filter((each) => each.sport === team?.sport && each.fromAge < (team?.underAge ?? 1000))
      .sort((a, b) => b.fromAge - a.fromAge)[0];
    players = rule?.players ?? 0;
    minutes = rule?.minutes ?? 0;
    if (session.state === "abandoned" && session.abandonedAfter)
      minutes = Math.min(minutes, session.abandonedAfter);
  } else if (session.exposureGrade !== "headcount") return none;
  if (players === 0 || minutes === 0) return none;
  const there = plan.roster
    .filter((r) => r.teamId === session.teamId && r.from <= session.day && (r.to ?? "9999") >= session.day)
    .filter((r) => !isUnavailable(plan, r.athleteId, session.day));
  const each = there.length === 0 ? 0 : Math.min(players, there.length) / there.length;
  const aes = session.exposureGrade === "headcount" ? 1 : 0;
  const shares: Share[] = there.map(({ athleteId }) => ({
    athleteId,
    aes: aes * each,
    hours: (each * minutes) / 60,
  }));
  const excess = players - there.length;
  if (excess > 0) shares.push({ athleteId: null, aes: aes * excess, hours: (excess * minutes) / 60 });
  return { grade: session.exposureGrade, shares };
}

type Place = { who: string | null; day: string; teamId: string; kind: string | null; countedOn: string };

function placeOf(world: World, { who, day, teamId }: Place) {
  const athlete = world.plan.athletes.find(({ id }) => id === who);
  return {
    sex: athlete?.sex ?? "unknown",
    age: band(world.bands, age(athlete?.born ?? null, day)),
    sport: world.plan.teams.find(({ id }) => id === teamId)?.sport ?? "none",
  };
}

function keyOf(world: World, by: RatesFilters["by"], place: Place, hurt?: Hurt): string {
  const { sex, age: years, sport } = placeOf(world, place);
  const said = (code: string | null | undefined) => (hurt ? (code ?? "none") : "");
  const keys: Record<RatesFilters["by"], string> = {
    sex,
    age: years,
    "sex-age": `${sex} ${years}`,
    sport,
    kind: place.kind ?? "none",
    team: place.teamId,
    month: place.countedOn.slice(0, 7),
    season: world.seasonId,
    contact: said(hurt?.contact),
    movement: said(hurt?.movement),
    tissue: said(hurt?.tissue),
    area: said(hurt?.bodyArea),
    "area-side": `${said(hurt?.bodyArea)} ${said(hurt?.side)}`,
  };
  return keys[by];
}

function isWhose(world: World, filters: RatesFilters, place: Place) {
  const own = placeOf(world, place);
  return (["sex", "age", "sport"] as const).every(
    (name) => filters[name] === "any" || filters[name] === own[name],
  );
}

function isWhat(filters: RatesFilters, hurt: Hurt) {
  const { contact } = hurt;
  const indirect = contact === "indirect_athlete" || contact === "indirect_object";
  const contacts = {
    any: true,
    without: contact === "non_contact" || indirect,
    non_contact: contact === "non_contact",
    indirect,
    direct: contact === "direct_athlete" || contact === "direct_object",
    unknown: contact === "unknown" || contact == null,
  };
  const isSudden = hurt.onset === "sudden" || hurt.onset === "sudden_repetitive";
  return (
    contacts[filters.contact] &&
    { any: true, sudden: isSudden, gradual: hurt.onset === "gradual" }[filters.onset] &&
    {
      all: true,
      recurrent: hurt.subsequence === "recurrent",
      index: hurt.subsequence === "index" || hurt.subsequence == null,
    }[filters.occurrence] &&
    (filters.area === "any" || filters.area === hurt.bodyArea) &&
    (filters.side === "any" || filters.side === hurt.side)
  );
}

const ofInjuriesAlone = ["contact", "movement", "tissue", "area", "area-side"];

const inKinds = (filters: RatesFilters, kind: string) =>
  filters.sessions === "training-and-matches"
    ? kind === "training" || kind === "match"
    : kind === filters.sessions;

export function daysLost({ plan, today, left }: World, injuryId: string, onset: string) {
  const own = plan.changes.filter((change) => change.injuryId === injuryId);
  const reasons = new Set(own.map((change) => change.reasonId));
  const leftOn = left?.get(own[0]?.athleteId ?? "") ?? today;
  const end = leftOn < today ? leftOn : today;
  let days = 0;
  for (let day = addDays(onset, 1); day <= end; day = addDays(day, 1))
    if ([...reasons].some((reason) => stateOn(plan, reason, day) !== "full")) days += 1;
  return days;
}

/** The team of an injury: its session's, else the athlete's on that day, one with exposure in that week first. */
function teamOf(world: World, injury: Hurt): string | undefined {
  const { held, weeks } = walk(world);
  const own = held.get(injury.sessionId ?? "");
  if (own) return own.session.teamId;
  const day = injury.onsetDay;
  const amount = (teamId: string, per: "aes" | "hours") => (weeks.get(weekKey(teamId, day))?.[per] ?? 0) > 0;
  const homes = world.plan.roster
    .filter((r) => r.athleteId === injury.athleteId && r.from <= day && (r.to ?? "9999") >= day)
    .sort(
      (a, b) =>
        Number(amount(b.teamId, "aes")) - Number(amount(a.teamId, "aes")) ||
        Number(amount(b.teamId, "hours")) - Number(amount(a.teamId, "hours")) ||
        a.from.localeCompare(b.from) ||
        a.teamId.localeCompare(b.teamId),
    );
  return homes[0]?.teamId;
}

/** The day on which an injury is counted: its session's, but a gradual one's own. */
function countingDay(world: World, injury: Hurt) {
  const own = walk(world).held.get(injury.sessionId ?? "");
  return injury.onset === "gradual" || !own ? injury.onsetDay : own.session.day;
}

const inSeason = ({ plan }: World, day: string) => day >= plan.season.from && day <= plan.season.to;

/** Teams that entered an injury of this season, whether it counts or not. */
function reportingTeams(world: World) {
  const entered = world.plan.injuries.filter(
    (injury) => !injury.withdrawn && inSeason(world, countingDay(world, injury)),
  );
  return new Set(entered.map((injury) => teamOf(world, injury)));
}

/** The injuries that count in a view, with the days each has cost. */
export function countedByHand(world: World, filters: RatesFilters) {
  const { held, lost, weeks } = walk(world);
  return world.plan.injuries.flatMap((injury) => {
    const days = lost.get(injury.injuryId) ?? 0;
    if (injury.withdrawn || injury.outsideSport || injury.subsequence === "exacerbation") return [];
    if (filters.injuries === "time-loss" && days < 1) return [];
    const own = held.get(injury.sessionId ?? "");
    const day = countingDay(world, injury);
    if (!inSeason(world, day)) return [];
    if (own && !inKinds(filters, own.session.kind)) return [];
    const teamId = teamOf(world, injury);
    if (injury.onset === "gradual") {
      if (!own && filters.sessions !== "training-and-matches") return [];
      if (!teamId || (weeks.get(weekKey(teamId, day))?.[filters.per] ?? 0) <= 0) return [];
    } else if (!own || amountOf(own.shares, filters.per) <= 0) return [];
    const kind = own?.session.kind ?? null;
    const place = { who: injury.athleteId, day: injury.onsetDay, teamId: teamId ?? "", kind, countedOn: day };
    if (!isWhose(world, filters, place) || !isWhat(filters, injury)) return [];
    return [{ injury, place, days }];
  });
}

export type Brute = Record<
  string,
  { injuries: number; recorded: number; headcount: number; estimated: number }
>;

/** Injuries and exposure of each group. */
export function countByHand(world: World, filters: RatesFilters): Brute {
  const result: Brute = {};
  const at = (key: string) => {
    result[key] ??= { injuries: 0, recorded: 0, headcount: 0, estimated: 0 };
    return result[key];
  };
  const whole = { injuries: 0, recorded: 0, headcount: 0, estimated: 0 };
  const reporting = reportingTeams(world);
  const confirmed = new Set(world.confirmed?.map(({ teamId, week }) => weekKey(teamId, week)));
  for (const { session, grade, shares } of walk(world).held.values()) {
    if (!inKinds(filters, session.kind)) continue;
    if (!reporting.has(session.teamId) && !confirmed.has(weekKey(session.teamId, session.day))) continue;
    for (const share of shares) {
      const place = { ...session, who: share.athleteId, countedOn: session.day };
      if (!isWhose(world, filters, place)) continue;
      const group = ofInjuriesAlone.includes(filters.by) ? whole : at(keyOf(world, filters.by, place));
      group[grade as "recorded" | "headcount" | "estimated"] +=
        filters.per === "aes" ? share.aes : share.hours;
    }
  }
  for (const { injury, place } of countedByHand(world, filters))
    at(keyOf(world, filters.by, place, injury)).injuries += 1;
  if (!ofInjuriesAlone.includes(filters.by)) return result;
  const { injuries: _none, ...exposure } = whole;
  return Object.fromEntries(Object.entries(result).map(([key, row]) => [key, { ...row, ...exposure }]));
}
