import { dictionary } from "@zxcvbn-ts/language-common";

const common = new Set(dictionary["passwords-common"].map((word) => String(word).toLowerCase()));

/** Whether a password is on the list of commonly used ones, also with digits or marks added at its end. */
export function isCommonPassword(password: string): boolean {
  const text = password.toLowerCase();
  if (common.has(text) || common.has(text.replace(/[\d!?.*_-]+$/, ""))) return true;
  // One character or one short piece repeated is as easily guessed as a listed word.
  return /^(.{1,4})\1+$/.test(text);
}

/** Why a password is refused, in words for the person; undefined when it is acceptable. */
export function passwordProblem(
  password: string,
  about: { email: string; name: string },
  length = { min: 12, max: 128 },
): string | undefined {
  if (password.length < length.min)
    return `Use at least ${length.min} characters. Three or four unrelated words work well.`;
  if (password.length > length.max) return `Use at most ${length.max} characters.`;
  if (isCommonPassword(password))
    return "This password is on lists that attackers try first. Choose another.";
  const text = password.toLowerCase();
  const known = [about.email.split("@")[0] ?? "", ...about.name.split(/\s+/)].filter(
    (part) => part.length >= 4,
  );
  if (known.some((part) => text.replace(part.toLowerCase(), "").length < 8))
    return "This password is mostly your own name or address. Choose another.";
  return undefined;
}
