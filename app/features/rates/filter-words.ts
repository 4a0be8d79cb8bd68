import { bodyAreaWords, sideWords, sportWords } from "~/features/vocabulary";
import { bodyAreas, type Sport, sides } from "~db/schema/codes";
import { formatCount } from "./figures";
import type {
  CaseDefinition,
  ContactChoice,
  Grouping,
  Narrowing,
  Occurrence,
  OnsetChoice,
  RatesFilters,
  RateUnit,
  SessionChoice,
} from "./filters";

/** The words of the filters, as they stand in the sentence above a view. */
export const partWords = {
  injuries: {
    "time-loss": "injuries with time loss",
    "medical-attention": "injuries that needed attention",
  } satisfies Record<CaseDefinition, string>,
  sessions: {
    "training-and-matches": "training and matches",
    training: "training",
    match: "matches",
  } satisfies Record<SessionChoice, string>,
  by: {
    "sex-age": "sex and age band",
    sex: "sex",
    age: "age band",
    sport: "sport",
    team: "team",
    kind: "session kind",
    month: "month",
    season: "season",
    contact: "contact",
    movement: "movement",
    area: "body area",
    "area-side": "body area and side",
    tissue: "tissue",
  } satisfies Record<Grouping, string>,
  per: { aes: "1000 athlete-exposures", hours: "1000 hours" } satisfies Record<RateUnit, string>,
};

export const contactChoiceWords: Record<ContactChoice, string> = {
  any: "with or without contact",
  without: "non-contact and indirect contact",
  non_contact: "non-contact",
  indirect: "indirect contact",
  direct: "direct contact",
  unknown: "contact not known",
};
export const onsetChoiceWords: Record<OnsetChoice, string> = {
  any: "any onset",
  sudden: "sudden onset",
  gradual: "gradual onset",
};
export const occurrenceWords: Record<Occurrence, string> = {
  all: "first and subsequent",
  index: "index injuries only",
  recurrent: "re-injuries only",
};

type Option = { value: string; label: string };

/** The choices of each narrowing, for a view's own bands and sports. */
export function narrowingChoices(
  bands: readonly string[],
  sports: readonly string[],
): Record<keyof Narrowing, { label: string; options: Option[] }> {
  const any = (label: string): Option => ({ value: "any", label });
  const of = (words: Record<string, string>) =>
    Object.entries(words).map(([value, label]) => ({ value, label }));
  return {
    area: {
      label: "Body area",
      options: [
        any("any body area"),
        ...bodyAreas.map((area) => ({ value: area, label: bodyAreaWords[area] })),
      ],
    },
    side: {
      label: "Side",
      options: [any("any side"), ...sides.map((side) => ({ value: side, label: sideWords[side] }))],
    },
    contact: { label: "Contact", options: of(contactChoiceWords) },
    onset: { label: "Onset", options: of(onsetChoiceWords) },
    occurrence: { label: "Occurrence", options: of(occurrenceWords) },
    sex: {
      label: "Sex",
      options: [
        any("every sex"),
        { value: "female", label: "girls and women" },
        { value: "male", label: "boys and men" },
        { value: "not_stated", label: "sex not stated" },
      ],
    },
    age: {
      label: "Age band",
      options: [
        any("every age"),
        ...bands.map((band) => ({ value: band, label: band })),
        { value: "unknown", label: "age not known" },
      ],
    },
    sport: {
      label: "Sport",
      options: [
        any("every sport"),
        ...sports.map((sport) => ({ value: sport, label: sportWords[sport as Sport] ?? sport })),
      ],
    },
  };
}

/** What stands before the noun: "non-contact and indirect contact knee"; empty when nothing is narrowed. */
function adjectives({ area, side, contact, onset, occurrence }: Narrowing): string {
  return [
    occurrence === "index" ? "index" : "",
    onset === "any" ? "" : onset,
    contact === "any" || contact === "unknown" ? "" : contactChoiceWords[contact],
    side === "left" || side === "right" ? side : "",
    area === "any" ? "" : (bodyAreaWords[area as keyof typeof bodyAreaWords] ?? area),
  ]
    .filter(Boolean)
    .join(" ");
}

/** A number of the injuries that a view counts: "no knee injuries", "1 re-injury", "6 non-contact injuries". */
export function countedInWords(count: number, filters: Narrowing): string {
  const [one, many] =
    filters.occurrence === "recurrent" ? ["re-injury", "re-injuries"] : ["injury", "injuries"];
  const number = count === 0 ? "no" : formatCount(count);
  // One injury is of one kind, and none is of either.
  const kind = count > 1 ? adjectives(filters) : adjectives(filters).replace(" and ", " or ");
  return [number, kind, count === 1 ? one : many].filter(Boolean).join(" ");
}

/** The injuries that a view counts, in words: "non-contact knee injuries with time loss". */
export function injuriesInWords(filters: Narrowing & Pick<RatesFilters, "injuries">): string {
  const noun = filters.occurrence === "recurrent" ? "re-injuries" : "injuries";
  const after = filters.injuries === "time-loss" ? "with time loss" : "that needed attention";
  const rest = filters.contact === "unknown" ? ", contact not known" : "";
  return [adjectives(filters), noun, after].filter(Boolean).join(" ") + rest;
}

/** Whose injuries, in words: "girls and women aged 15-16 in soccer"; empty for everybody. */
export function peopleInWords({ sex, age, sport }: RatesFilters): string {
  const who =
    sex === "any" ? "" : (narrowingChoices([], []).sex.options.find((o) => o.value === sex)?.label ?? "");
  const aged =
    age === "any"
      ? ""
      : age === "unknown"
        ? "age not known"
        : `aged ${age.replace(/^(\d+)-(\d+)$/, "$1 to $2")}`;
  const where = sport === "any" ? "" : `in ${sportWords[sport as Sport] ?? sport}`;
  return [who, aged, where].filter(Boolean).join(" ");
}

const otherSides: Record<string, string> = { both: "both sides", none: "no side", unknown: "side not known" };

/** All that a view is narrowed to, in words: "knee injuries, girls and women in soccer"; null for nothing. */
export function narrowingInWords(filters: RatesFilters): string | null {
  const injuries = injuriesInWords({ ...filters, injuries: "time-loss" }).replace(" with time loss", "");
  const side = otherSides[filters.side] ?? "";
  const who = peopleInWords(filters);
  const isOnlyWho = injuries === "injuries" && !side;
  const parts = [isOnlyWho ? "" : injuries, side, who].filter(Boolean);
  return parts.length > 0 ? parts.join(", ") : null;
}
