import { foldText } from "~/platform/fold-text";
import { bodyAreaWords, pathologyWords, signWords, tissueWords } from "../vocabulary";

/**
 * The mail names the person to ask for, and nothing else that somebody types reaches it. So that line may hold neither
 * the athlete's name nor a clinical word.
 */
const small = new Set(["and", "the", "several", "other", "own", "not", "without", "specific"]);
const clinicalWords = new Set(
  [bodyAreaWords, pathologyWords, signWords, tissueWords]
    .flatMap((words) => Object.values(words))
    .flatMap((words) => foldText(words).split(/[^a-z]+/))
    .filter((word) => word.length > 2 && !small.has(word)),
);

const wordsOf = (text: string) =>
  text
    .split(/[^\p{L}\p{M}\p{N}]+/u)
    .map(foldText)
    .filter(Boolean);

/**
 * What is wrong with a name that is to stand in a mail; undefined when it may.
 * @param colleague the name of the person who sends: may stand there whatever it is
 */
export function mailNameProblem(
  name: string,
  { athlete, colleague }: { athlete: readonly string[]; colleague: string },
): string | undefined {
  if (name === colleague) return undefined;
  const words = wordsOf(name);
  if (athlete.flatMap(wordsOf).some((word) => words.includes(word)))
    return "This line also stands in the e-mail, which must not name the athlete. Name whom to ask for.";
  if (words.some((word) => clinicalWords.has(word)))
    return "This line also stands in the e-mail, which must hold nothing clinical. Name whom to ask for.";
  return undefined;
}
