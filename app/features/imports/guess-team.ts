import { foldText } from "~/platform/fold-text";
import type { Sport, TeamSex } from "~db/schema/codes";
import type { TeamGuess } from "./imports.schema";

const sportWords: [Sport, RegExp][] = [
  ["soccer", /\b(soccer|football|fussball|futbol|pilka nozna|pel droed)\b/u],
  ["basketball", /\b(basketball|baloncesto|koszykowka)\b/u],
  ["handball", /\b(handball|balonmano|pilka reczna)\b/u],
  ["volleyball", /\b(volleyball|voleibol|siatkowka)\b/u],
  ["rugby", /\brugby\b/u],
  ["field_hockey", /\b(field hockey|hockey|feldhockey)\b/u],
  ["netball", /\bnetball\b/u],
];
const sexWords: [TeamSex, RegExp][] = [
  ["girls", /\b(girls?|madchen|chicas|dziewczeta|merched|wu\d{1,2})\b/u],
  ["boys", /\b(boys?|jungen|knaben|chicos|chlopcy|bechgyn|mu\d{1,2})\b/u],
  ["women", /\b(women|womens|ladies|damen|frauen|mujeres|kobiety|menywod)\b/u],
  ["men", /\b(men|mens|herren|manner|hombres|mezczyzni|dynion)\b/u],
  ["mixed", /\b(mixed|coed|gemischt|mixto)\b/u],
];

/**
 * What a team's name suggests about it; null where it says nothing. A suggestion only: a person confirms it before
 * the team is made.
 */
export function guessTeam(name: string): TeamGuess {
  const folded = foldText(name);
  const find = <Code>(words: [Code, RegExp][]) =>
    words.find(([, pattern]) => pattern.test(folded))?.[0] ?? null;
  const age = Number(/\b[mw]?u ?(\d{1,2})\b|\bunder (\d{1,2})\b/u.exec(folded)?.slice(1).find(Boolean));
  return { sport: find(sportWords), sex: find(sexWords), underAge: age >= 5 && age <= 25 ? age : null };
}
