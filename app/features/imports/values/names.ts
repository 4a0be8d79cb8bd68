import { foldText } from "~/platform/fold-text";
import { accept, type Parsed, quoteCell, refuse, tidyCell } from "./parsed";

export type NameOrder = "family-first" | "given-first";
export type PersonName = { givenName: string; familyName: string };

/** Longest given or family name that is believed. */
export const longestName = 100;
const particles = new Set(
  "af al ap ab bin da das de degli dei del della den der des di do dos du el la las le los ter ten van vom von y zu zum zur".split(
    " ",
  ),
);
const lostLetter = /[?\uFFFD¿]/u;
/** UTF-8 read as Windows-1252 ("NuÃ±ez") and Windows-1250 read as Windows-1252 ("³ukaszewska"). */
const wrongEncoding = /[ÃÂÅÄ][\u0080-\u00BF€-™]|[¹²³¼½¾£¥¦¬±¶¯¡]/u;
// biome-ignore lint/suspicious/noControlCharactersInRegex: control characters are what is refused here
const control = /[\u0000-\u001F\u007F-\u009F]/u;

/** Folds a name for search and matching: no accents, no case, no punctuation, ł to l, ø to o, ß to ss. */
export const normaliseName = foldText;

/** Reads a given or a family name, or the name of a guardian or team, and keeps it as written. */
export function parseNamePart(text: string, what = "name"): Parsed<string> {
  const cell = tidyCell(text).replace(/[\r\n\t ]+/gu, " ");
  if (cell === "") return refuse("name.missing", `The ${what} is missing.`, `Fill in the ${what}.`);
  if (control.test(cell)) {
    return refuse(
      "name.control",
      `The ${what} ${quoteCell(text)} holds invisible control characters.`,
      "Type it again.",
    );
  }
  if (cell.length > longestName) {
    return refuse(
      "name.too-long",
      `The ${what} ${quoteCell(text)} is longer than ${longestName} characters.`,
      "Shorten it, and check that the right column is mapped.",
    );
  }
  if (!/[\p{L}\p{N}]/u.test(cell)) {
    return refuse("name.no-letter", `${quoteCell(text)} is not a ${what}.`, `Write the ${what}.`);
  }
  return accept(cell, warnAboutName(cell));
}

/**
 * Parts a full name: "Family, Given" by its comma, anything else by the order a person has chosen for the
 * column. Name particles (van, de la) stay with the family name; a longer name is parted with a warning.
 */
export function parsePersonName(text: string, order?: NameOrder): Parsed<PersonName> {
  const cell = tidyCell(text).replace(/\s+/gu, " ");
  if (cell === "") return refuse("name.missing", "The name is missing.", "Fill in the athlete’s name.");
  const byComma = cell.split(",").map((part) => part.trim());
  if (byComma.length > 2) {
    return refuse("name.commas", `${quoteCell(text)} has more than one comma.`, "Write it as Family, Given.");
  }
  if (byComma.length === 2) return checkBoth(byComma[1] ?? "", byComma[0] ?? "", undefined);
  const words = cell.split(" ");
  if (words.length < 2) {
    return refuse(
      "name.one-word",
      `${quoteCell(text)} is one word; a given name and a family name are needed.`,
      "Write it as Family, Given.",
    );
  }
  if (!order) {
    return refuse(
      "name.order",
      `It is not clear which part of ${quoteCell(text)} is the family name.`,
      "Say in which order this column writes its names, or write them as Family, Given.",
    );
  }
  return order === "given-first" ? partGivenFirst(words) : partFamilyFirst(words);
}

/** True when a column of full names cannot be read without asking for the order. */
export function needsNameOrder(values: Iterable<string>) {
  for (const value of values) {
    const cell = tidyCell(value);
    if (cell.includes(" ") && !cell.includes(",")) return true;
  }
  return false;
}

function partGivenFirst(words: string[]) {
  const particle = words.findIndex(
    (word, index) => index > 0 && index < words.length - 1 && isParticle(word),
  );
  const cut = particle === -1 ? words.length - 1 : particle;
  return checkBoth(
    words.slice(0, cut).join(" "),
    words.slice(cut).join(" "),
    particle === -1 ? words : undefined,
  );
}

function partFamilyFirst(words: string[]) {
  let cut = 1;
  // "van der Berg Anna": the particles and the word they lead to.
  while (cut < words.length - 1 && isParticle(words[cut - 1] ?? "")) cut += 1;
  return checkBoth(words.slice(cut).join(" "), words.slice(0, cut).join(" "), cut === 1 ? words : undefined);
}

function isParticle(word: string) {
  return particles.has(word.toLowerCase());
}

/** `words` is given when more than one cut was possible. */
function checkBoth(given: string, family: string, words: string[] | undefined): Parsed<PersonName> {
  const familyName = parseNamePart(family, "family name");
  if (!familyName.ok) return familyName;
  const givenName = parseNamePart(given, "given name");
  if (!givenName.ok) return givenName;
  const doubtful = words && words.length > 2;
  const cutWarning = doubtful
    ? `Read as given name ${quoteCell(given)} and family name ${quoteCell(family)}: check that it is parted rightly.`
    : undefined;
  const value = { givenName: givenName.value, familyName: familyName.value };
  return accept(value, familyName.warning ?? givenName.warning ?? cutWarning);
}

function warnAboutName(name: string) {
  if (lostLetter.test(name)) {
    return `A letter may have been lost in ${quoteCell(name)} when the file was saved. Check the name.`;
  }
  if (wrongEncoding.test(name)) {
    return `${quoteCell(name)} looks wrongly decoded. Try another encoding, or check the name.`;
  }
  return undefined;
}
