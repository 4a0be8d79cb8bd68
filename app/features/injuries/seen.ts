import type { FormValues } from "~/ui";
import { type BodyArea, bodyAreas, type Movement, movements, signs } from "~db/schema/codes";
import type { Seen } from "./cautions";

/** The areas that stand as chips on the log form; the others open behind "another area". */
export const commonAreas: readonly BodyArea[] = ["knee", "ankle", "thigh", "head"];
/** The movements that stand as chips. */
export const commonMovements: readonly Movement[] = ["cutting", "landing", "pivoting", "decelerating"];

export type Answers = Seen & { movement: Movement | null; outside: boolean; inSession: boolean };

const known = <T extends string>(codes: readonly T[], text: string | undefined) =>
  codes.find((code) => code === text) ?? null;

/**
 * What a form that is being filled in says so far, read leniently: for the cautions shown while typing and for the
 * count of what can wait. The server parses the form again, strictly.
 * @param all the values given under a name
 */
export function answersOf(all: (name: string) => readonly string[]): Answers {
  const one = (name: string) => all(name)[0];
  const chip = one("bodyArea");
  const move = one("movement");
  const chosen = ["signs", "emergencySigns", "headSigns"].flatMap((name) => [...all(name)]);
  const continued = one("couldContinue");
  const when = one("when") ?? "";
  return {
    bodyArea: known(bodyAreas, chip === "another" ? one("otherArea") : chip),
    signs: signs.filter((sign) => chosen.includes(sign)),
    suspectedConcussion: one("suspectedConcussion") === "yes",
    couldContinue: continued === "yes" ? true : continued === "no" ? false : null,
    movement: known(movements, move === "another" ? one("otherMovement") : move),
    outside: when === "outside",
    inSession: when === "today" || when.startsWith("session:"),
  };
}

/** The same from values that were kept or sent back. */
export const answersOfValues = (values: FormValues | undefined) =>
  answersOf((name) => {
    const value = values?.[name];
    if (value === undefined || value === "") return [];
    return Array.isArray(value) ? value : [value];
  });

/** The same from a form in the browser. */
export function answersOfForm(form: HTMLFormElement): Answers {
  const data = new FormData(form);
  return answersOf((name) =>
    data.getAll(name).filter((value): value is string => typeof value === "string" && value !== ""),
  );
}
