import { foldText } from "~/platform/fold-text";
import { legs, presences, relations, sessionKinds, sexes, surfaces } from "~db/schema/codes";
import { accept, type Parsed, quoteCell, refuse, tidyCell } from "./parsed";

type Words<Code extends string> = Record<Code, string[]>;
type Coded<Code extends string> = (text: string) => Parsed<Code>;

/** Cells by which people say that they do not say. */
const noAnswer = [
  "n a",
  "na",
  "none",
  "unknown",
  "not stated",
  "not known",
  "undisclosed",
  "prefer not to say",
];
const noAnswerElsewhere = [
  "keine angabe",
  "k a",
  "unbekannt",
  "nicht angegeben",
  "no consta",
  "brak",
  "anhysbys",
];
const isNoAnswer = (folded: string) =>
  folded === "" || folded === "x" || [...noAnswer, ...noAnswerElsewhere].includes(folded);

/** Makes a reader of coded cells out of the words people use for each code. */
function makeReader<Code extends string>(
  name: string,
  codes: readonly Code[],
  words: Words<Code>,
): Coded<Code> {
  const known = new Map<string, Code>();
  for (const code of codes) for (const word of [code, ...words[code]]) known.set(foldText(word), code);
  const choices = codes.map((code) => code.replaceAll("_", " ")).join(", ");
  return (text) => {
    const cell = tidyCell(text);
    // Most cells are written as the code itself: folding is for the others.
    const code = known.get(cell) ?? known.get(foldText(cell));
    if (code !== undefined) return accept(code);
    return refuse(
      `${name}.unknown`,
      `${quoteCell(text)} is not a known ${name}.`,
      `Write one of: ${choices}.`,
    );
  };
}

const readSex = makeReader("sex", sexes, {
  female: [
    "f",
    "fem",
    "w",
    "woman",
    "women",
    "girl",
    "girls",
    "weiblich",
    "mädchen",
    "frau",
    "mujer",
    "chica",
    "femenino",
    "niña",
    "kobieta",
    "k",
    "żeńska",
    "dziewczynka",
    "benyw",
    "merch",
  ],
  male: [
    "m",
    "man",
    "men",
    "boy",
    "boys",
    "männlich",
    "junge",
    "mann",
    "hombre",
    "chico",
    "masculino",
    "niño",
    "mężczyzna",
    "męska",
    "chłopiec",
    "gwryw",
    "bachgen",
  ],
  not_stated: [...noAnswer, ...noAnswerElsewhere],
});

/** Reads the sex. Blank, "?", "x" and other ways of not answering give "not_stated"; it is never guessed. */
export function parseSex(text: string): Parsed<(typeof sexes)[number]> {
  const cell = tidyCell(text);
  if (!isNoAnswer(foldText(cell))) return readSex(cell);
  return accept("not_stated", cell === "" ? undefined : `Sex ${quoteCell(text)} was recorded as not stated.`);
}

const readLeg = makeReader("leg", legs, {
  left: [
    "l",
    "left foot",
    "left leg",
    "left footed",
    "links",
    "izquierda",
    "izquierdo",
    "zurda",
    "zurdo",
    "lewa",
    "chwith",
  ],
  right: [
    "r",
    "right foot",
    "right leg",
    "right footed",
    "rechts",
    "derecha",
    "derecho",
    "diestra",
    "diestro",
    "prawa",
    "de",
    "dde",
  ],
  both: ["b", "either", "both feet", "two footed", "beide", "beidfüßig", "ambas", "ambos", "obie", "y ddwy"],
  unknown: [...noAnswer, ...noAnswerElsewhere],
});

/** Reads the dominant leg; blank and "?" give "unknown". */
export function parseDominantLeg(text: string): Parsed<(typeof legs)[number]> {
  return isNoAnswer(foldText(tidyCell(text))) ? accept("unknown") : readLeg(text);
}

/** Reads the kind of a session. */
export const parseKind = makeReader("kind of session", sessionKinds, {
  training: [
    "t",
    "practice",
    "train",
    "trainings",
    "training session",
    "übung",
    "einheit",
    "trainingseinheit",
    "entrenamiento",
    "entreno",
    "trening",
    "hyfforddiant",
    "ymarfer",
  ],
  match: [
    "m",
    "game",
    "games",
    "matches",
    "competition",
    "comp",
    "fixture",
    "league",
    "cup",
    "friendly",
    "tournament",
    "spiel",
    "wettkampf",
    "turnier",
    "partido",
    "competición",
    "mecz",
    "zawody",
    "gêm",
    "cystadleuaeth",
  ],
  strength: [
    "s",
    "gym",
    "weights",
    "conditioning",
    "strength and conditioning",
    "s c",
    "kraft",
    "krafttraining",
    "fuerza",
    "gimnasio",
    "siłownia",
    "cryfder",
  ],
  other: ["o", "sonstiges", "andere", "otro", "inne", "arall"],
});

/** Reads the surface of a session. */
export const parseSurface = makeReader("surface", surfaces, {
  natural_grass: [
    "grass",
    "lawn",
    "turf natural",
    "natural turf",
    "rasen",
    "naturrasen",
    "césped",
    "césped natural",
    "hierba",
    "trawa",
    "glaswellt",
  ],
  artificial_turf: [
    "artificial",
    "artificial grass",
    "astro",
    "astroturf",
    "3g",
    "4g",
    "synthetic turf",
    "synthetic grass",
    "kunstrasen",
    "césped artificial",
    "sztuczna trawa",
  ],
  wood: [
    "wooden floor",
    "parquet",
    "hall",
    "sports hall",
    "holz",
    "parkett",
    "halle",
    "madera",
    "parqué",
    "drewno",
    "parkiet",
    "pren",
  ],
  synthetic_court: [
    "synthetic",
    "court",
    "hard court",
    "rubber",
    "pvc",
    "linoleum",
    "kunststoff",
    "tartan",
    "pista sintética",
    "sintético",
  ],
  sand: ["beach", "arena", "piasek", "tywod"],
  snow: ["schnee", "nieve", "śnieg", "eira"],
  other: ["sonstiges", "andere", "otro", "inne", "arall"],
});

/** Reads whether an athlete took part, was present only, or was absent. Unclear marks are refused. */
export const parsePresence = makeReader("presence", presences, {
  took_part: [
    "took part",
    "participated",
    "played",
    "trained",
    "full",
    "yes",
    "y",
    "x",
    "1",
    "ja",
    "teilgenommen",
    "dabei",
    "sí",
    "participó",
    "tak",
  ],
  present_only: [
    "present only",
    "watched",
    "bench",
    "unused substitute",
    "did not play",
    "dnp",
    "spectator",
    "zuschauer",
    "nur anwesend",
  ],
  absent: [
    "a",
    "no",
    "n",
    "0",
    "away",
    "missing",
    "excused",
    "sick",
    "ill",
    "injured",
    "nein",
    "abwesend",
    "fehlt",
    "krank",
    "verletzt",
    "ausente",
    "nie",
    "nieobecny",
    "nieobecna",
    "absennol",
  ],
});

/** Reads what a guardian is to the athlete. */
export const parseRelation = makeReader("relation", relations, {
  mother: ["mum", "mom", "mutter", "mama", "madre", "matka", "mam"],
  father: ["dad", "vater", "papa", "padre", "ojciec", "tata", "tad"],
  parent: ["parents", "elternteil", "eltern", "rodzic", "rhiant"],
  guardian: [
    "legal guardian",
    "vormund",
    "erziehungsberechtigt",
    "erziehungsberechtigte",
    "tutor",
    "tutora",
    "opiekun",
    "gwarcheidwad",
  ],
  carer: [
    "caregiver",
    "foster carer",
    "foster parent",
    "betreuer",
    "betreuerin",
    "cuidador",
    "cuidadora",
    "gofalwr",
  ],
  other: [
    "grandmother",
    "grandfather",
    "grandparent",
    "aunt",
    "uncle",
    "stepmother",
    "stepfather",
    "step parent",
    "sibling",
    "sister",
    "brother",
    "oma",
    "opa",
    "andere",
    "otro",
    "inne",
    "arall",
  ],
});
