/**
 * Flesch-Kincaid grade level: 0.39 words per sentence + 11.8 syllables per word - 15.59.
 * Source: Kincaid, Fishburne, Rogers and Chissom (1975), Derivation of new readability formulas for Navy
 * enlisted personnel, Research Branch Report 8-75. The result is a school year of the United States, whose
 * pupils are five years older than its number: reading age 11 is grade 6.
 */
export function computeReadingGrade(text: string) {
  const sentences = splitSentences(text);
  const words = sentences.flatMap(splitWords);
  if (words.length === 0) throw new Error("There is no sentence to grade");
  const syllables = words.reduce((sum, word) => sum + countSyllables(word), 0);
  return 0.39 * (words.length / sentences.length) + 11.8 * (syllables / words.length) - 15.59;
}

/** Whole sentences alone: a heading, a button or a number by itself would flatter the grade. */
export function splitSentences(text: string) {
  return text
    .split(/\n+/)
    .map((line) => line.replace(/https?:\/\/\S+|\S+@\S+/g, " ").trim())
    .flatMap((line) => line.match(/[^.?!]+[.?!]/g) ?? [])
    .filter((sentence) => splitWords(sentence).length > 0);
}

function splitWords(sentence: string) {
  return sentence.toLowerCase().match(/[a-z]+(?:['-][a-z]+)*/g) ?? [];
}

/** Groups of vowels, less a silent final e. It errs upwards ("asked" is 2), so the grade does too. */
export function countSyllables(word: string) {
  return word.split("-").reduce((sum, part) => {
    const groups = part.match(/[aeiouy]+/g)?.length ?? 0;
    const silent = groups > 1 && /[^aeiouyl]e$/.test(part) ? 1 : 0;
    return sum + Math.max(1, groups - silent);
  }, 0);
}
