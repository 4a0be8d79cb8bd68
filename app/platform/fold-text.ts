/** Letters that no Unicode decomposition takes apart, with the plain letters people type instead. */
const plainLetters: Record<string, string> = {
  ß: "ss",
  æ: "ae",
  œ: "oe",
  ø: "o",
  ł: "l",
  đ: "d",
  ð: "d",
  þ: "th",
  ħ: "h",
  ı: "i",
  ŋ: "n",
  ŧ: "t",
  ĸ: "k",
};
const plainLetterPattern = new RegExp(`[${Object.keys(plainLetters).join("")}]`, "gu");

/**
 * Folds text for search and comparison, never for display: compatibility forms and accents are taken
 * apart and dropped, letters are lower case, apostrophes vanish, every other sign becomes one space.
 * "D’Arcy-Wray" gives "darcy wray", "Łukaszewska" gives "lukaszewska". Other scripts keep their letters.
 */
export function foldText(text: string) {
  return text
    .normalize("NFKD")
    .replace(/\p{M}/gu, "")
    .toLowerCase()
    .normalize("NFKD")
    .replace(/\p{M}/gu, "")
    .replace(plainLetterPattern, (letter) => plainLetters[letter] ?? letter)
    .replace(/['’‘ʼ`´]/gu, "")
    .replace(/[^\p{L}\p{N}]+/gu, " ")
    .trim();
}
