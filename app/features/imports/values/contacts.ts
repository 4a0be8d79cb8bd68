import { foldText } from "~/platform/fold-text";
import { accept, type Parsed, quoteCell, refuse, tidyCell } from "./parsed";

const emailShape =
  /^[^\s@<>()[\],;:"\\]+@(?:[\p{L}\p{N}](?:[\p{L}\p{N}-]{0,61}[\p{L}\p{N}])?\.)+\p{L}[\p{L}\p{N}-]{1,62}$/u;
const wrapped = /^[^<>]*<\s*([^<>\s]+)\s*>$/u;
/** Longest address of a mailbox, RFC 5321 4.5.3.1.3 less the angle brackets. */
const longestEmail = 254;
const scientific = /^[+-]?\d(?:[.,]\d+)?e\+?\d+$/iu;

/** Reads one e-mail address ("Name <address>" too) and gives it as typed, with the domain in lower case. */
export function parseEmail(text: string): Parsed<string> {
  const cell = tidyCell(text).replace(/^mailto:/iu, "");
  const address = wrapped.exec(cell)?.[1] ?? cell;
  const at = address.lastIndexOf("@");
  const [local, domain] = [address.slice(0, at), address.slice(at + 1)];
  const dots = local.startsWith(".") || local.endsWith(".") || local.includes("..");
  if (emailShape.test(address) && !dots && local.length <= 64 && address.length <= longestEmail) {
    return accept(`${local}@${domain.toLowerCase()}`);
  }
  const several = (cell.match(/@/gu) ?? []).length > 1;
  return several
    ? refuse(
        "email.several",
        `${quoteCell(text)} holds more than one address.`,
        "Keep one address in this cell.",
      )
    : refuse(
        "email.invalid",
        `${quoteCell(text)} is not an e-mail address.`,
        "Correct the address, for example name@example.org, or leave the cell empty.",
      );
}

/** Reads a telephone number and keeps it as typed: people read it, machines do not dial it. */
export function parsePhone(text: string): Parsed<string> {
  const cell = tidyCell(text);
  if (scientific.test(cell)) {
    return refuse(
      "phone.shortened",
      `${quoteCell(text)} was shortened by a spreadsheet; the last digits are lost.`,
      "Format the column as text, type the number again and save the file again.",
    );
  }
  const digits = cell.replace(/\D/gu, "").length;
  if (digits >= 5 && digits <= 20 && cell.length <= 60 && /^[+(\d]/u.test(cell)) return accept(cell);
  return refuse(
    "phone.invalid",
    `${quoteCell(text)} is not a telephone number.`,
    "Write the number with its area code, for example +44 1632 960001, or leave the cell empty.",
  );
}

/** The two-letter codes of ISO 639-1. */
const languageCodes =
  "aa ab ae af ak am an ar as av ay az ba be bg bi bm bn bo br bs ca ce ch co cr cs cu cv cy da de dv dz ee el en eo es et eu fa ff fi fj fo fr fy ga gd gl gn gu gv ha he hi ho hr ht hu hy hz ia id ie ig ii ik io is it iu ja jv ka kg ki kj kk kl km kn ko kr ks ku kv kw ky la lb lg li ln lo lt lu lv mg mh mi mk ml mn mr ms mt my na nb nd ne ng nl nn no nr nv ny oc oj om or os pa pi pl ps pt qu rm rn ro ru rw sa sc sd se sg si sk sl sm sn so sq sr ss st su sv sw ta te tg th ti tk tl tn to tr ts tt tw ty ug uk ur uz ve vi vo wa wo xh yi yo za zh zu".split(
    " ",
  );
const languageNames = new Map<string, string>();

/** Reads a language: an ISO 639-1 code, with or without a region, or its name in one of several languages. */
export function parseLanguage(text: string): Parsed<string> {
  const cell = tidyCell(text).toLowerCase();
  const code = /^([a-z]{2})(?:[-_][a-z0-9]{2,8})*$/u.exec(cell)?.[1];
  if (code && languageCodes.includes(code)) return accept(code);
  const named = namesOfLanguages().get(foldText(cell));
  if (named) return accept(named);
  return refuse(
    "language.unknown",
    `${quoteCell(text)} is not a known language.`,
    "Write the language or its two-letter code, for example Polish or pl.",
  );
}

/** The English name of a language code, for sentences. */
export function nameLanguage(code: string) {
  return new Intl.DisplayNames(["en"], { type: "language" }).of(code) ?? code;
}

function namesOfLanguages() {
  if (languageNames.size > 0) return languageNames;
  for (const code of languageCodes) {
    for (const locale of ["en", "de", "es", "pl", "cy", code]) {
      const name = new Intl.DisplayNames([locale], { type: "language" }).of(code);
      if (name && !languageNames.has(foldText(name))) languageNames.set(foldText(name), code);
    }
  }
  return languageNames;
}
