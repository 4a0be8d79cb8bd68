import type { AgeBand } from "~/statistics";
import { bodyAreas, contacts, movements, type Sport, sides, tissues } from "~db/schema/codes";
import {
  bodyAreaWords,
  contactWords,
  movementWords,
  sentenceCase,
  sideWords,
  sportWords,
  tissueWords,
} from "../vocabulary";
import { bandOf, type CountedSex, type ExposureCell, type InjuryRow } from "./counting";
import type { Grouping, InjuryGrouping } from "./filters";
import { monthsOf, monthWords, type SeasonDays, seasonOf } from "./periods";

/** The groups of a table: their keys, their words, their order, and which cells and injuries fall in them. */

export type Band = AgeBand & { label: string };
export type RatedTeam = { id: string; name: string; sport: string; sex: string };

export type Group = {
  key: string;
  label: string;
  sex: CountedSex | null;
  /** Words of the band, for the picture; null outside the grouping by sex and age. */
  band: string | null;
  teamId: string | null;
};

/** What cells and injuries have in common, as far as groups go. */
type Placed = {
  day: string;
  sex: CountedSex;
  age: number | null;
  teamId: string | null;
  kind: string | null;
  /** Only injuries have a kind of their own: cells are in none of its groups. */
  injury?: Pick<InjuryRow, InjuryCode>;
};
type InjuryCode = "contact" | "movement" | "bodyArea" | "side" | "tissue";

export const placeCell = (cell: ExposureCell): Placed => cell;
export const placeInjury = (injury: InjuryRow): Placed => ({
  day: injury.day,
  sex: injury.sex,
  age: injury.age,
  teamId: injury.teamId,
  kind: injury.sessionKind,
  injury,
});

const sexes: readonly CountedSex[] = ["female", "male", "not_stated", "unknown"];

/** "15-16" as it is spoken: "15 to 16". */
export const bandWords = (label: string) => label.replace(/^(\d+)\s*[-–]\s*(\d+)$/, "$1 to $2");

export type SexNames = Record<CountedSex, string>;

const otherSexes = { not_stated: "sex not stated", unknown: "not known, above the roster" };
const young: SexNames = { female: "girls", male: "boys", ...otherSexes };
const adult: SexNames = { female: "women", male: "men", ...otherSexes };
const all: SexNames = { female: "girls and women", male: "boys and men", ...otherSexes };

/** Words of the sexes for the teams looked at: girls where all teams are of the young, women where all are of adults. */
export function sexNames(teams: readonly RatedTeam[]): SexNames {
  const some = (...codes: string[]) => teams.some(({ sex }) => codes.includes(sex));
  if (some("women", "men")) return some("girls", "boys") ? all : adult;
  return young;
}

const namesInBand = ({ to }: AgeBand) => (to !== null && to <= 18 ? young : adult);

type Context = {
  bands: readonly Band[];
  teams: readonly RatedTeam[];
  seasons: readonly SeasonDays[];
  /** The days looked at, from the first to the last. */
  from: string;
  to: string;
};

const group = (key: string, label: string, rest: Partial<Group> = {}): Group => ({
  key,
  label: sentenceCase(label),
  sex: null,
  band: null,
  teamId: null,
  ...rest,
});

const notSaid = "not said";

/** The groups of injuries alone: codes in their own order, then what was not said. */
const injuryGroups: Record<InjuryGrouping, () => Group[]> = {
  contact: () => [...contacts.map((code) => group(code, contactWords[code])), group("none", notSaid)],
  movement: () => [...movements.map((code) => group(code, movementWords[code])), group("none", notSaid)],
  tissue: () => [...tissues.map((code) => group(code, tissueWords[code])), group("none", notSaid)],
  area: () => bodyAreas.map((code) => group(code, bodyAreaWords[code])),
  "area-side": () =>
    bodyAreas.flatMap((area) =>
      sides.map((side) => group(`${area} ${side}`, `${bodyAreaWords[area]}, ${sideWords[side]}`)),
    ),
};

/** Every possible group of a grouping in the order of its table; groups without exposure or injuries drop out later. */
export function listGroups(by: Grouping, { bands, teams, seasons, from, to }: Context): Group[] {
  const names = sexNames(teams);
  if (by === "sex") return sexes.map((sex) => group(sex, names[sex], { sex }));
  if (by === "age")
    return [
      ...bands.map(({ label }) => group(label, bandWords(label), { band: bandWords(label) })),
      group("unknown", "age not known", { band: "age not known" }),
    ];
  if (by === "sex-age") {
    const known = bands.flatMap((band) =>
      (["female", "male", "not_stated"] as const).map((sex) => {
        const words = bandWords(band.label);
        return group(`${sex} ${band.label}`, `${namesInBand(band)[sex]}, ${words}`, { sex, band: words });
      }),
    );
    const ageless = (["female", "male", "not_stated"] as const).map((sex) =>
      group(`${sex} unknown`, `${names[sex]}, age not known`, { sex, band: "age not known" }),
    );
    return [
      ...known,
      ...ageless,
      group("unknown unknown", names.unknown, { sex: "unknown", band: "not known" }),
    ];
  }
  if (by === "sport") {
    const sports = [...new Set(teams.map(({ sport }) => sport))] as Sport[];
    return sports.sort().map((sport) => group(sport, sportWords[sport]));
  }
  if (by === "kind")
    return [group("training", "training"), group("match", "matches"), group("none", "gradual, no session")];
  if (by === "month") return monthsOf(from, to).map((month) => group(month, monthWords(month)));
  if (by === "season") return seasons.map(({ id, name }) => ({ ...group(id, name), label: name }));
  if (by === "team")
    return teams.map(({ id, name }) => ({ ...group(id, name, { teamId: id }), label: name }));
  return injuryGroups[by]();
}

/** The key of the group that something falls in. */
export function groupKey(by: Grouping, { bands, teams, seasons }: Omit<Context, "from" | "to">) {
  const sportOf = new Map(teams.map(({ id, sport }) => [id, sport]));
  return ({ day, sex, age, teamId, kind, injury }: Placed): string => {
    switch (by) {
      case "sex":
        return sex;
      case "age":
        return bandOf(age, bands) ?? "unknown";
      case "sex-age":
        return `${sex} ${bandOf(age, bands) ?? "unknown"}`;
      case "sport":
        return (teamId && sportOf.get(teamId)) || "none";
      case "kind":
        return kind ?? "none";
      case "team":
        return teamId ?? "none";
      case "month":
        return day.slice(0, 7);
      case "season":
        return seasonOf(day, seasons)?.id ?? "none";
      case "area":
        return injury?.bodyArea ?? "";
      case "area-side":
        return injury ? `${injury.bodyArea} ${injury.side}` : "";
      case "contact":
      case "movement":
      case "tissue":
        return injury ? (injury[by] ?? "none") : "";
    }
  };
}
