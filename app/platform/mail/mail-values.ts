import { DateTime } from "luxon";

/** Makes a value fit for one line (subject, heading): controls and line breaks become single spaces. */
export function toOneLine(value: string) {
  return value.replace(/[\p{Cc}\p{Zl}\p{Zp}\s]+/gu, " ").trim();
}

/** Returns the link unchanged, or throws: a mail with a broken or a script link must never leave. */
export function requireWebLink(link: string) {
  const protocol = URL.canParse(link) ? new URL(link).protocol : "none";
  if (protocol === "https:" || protocol === "http:") return link;
  throw new Error("A link in a mail must be a whole http or https address");
}

/** `tel:` link of a phone number as people write it; throws when fewer than three digits are in it. */
export function toPhoneLink(phone: string) {
  const dialled = phone.replace(/\(0\)/g, "").replace(/[^\d+]/g, "");
  if (dialled.replace(/\D/g, "").length < 3)
    throw new Error("A phone number in a mail needs at least 3 digits");
  return `tel:${dialled}`;
}

/** A calendar date (`2026-10-06`) in words: "Tuesday, 6 October 2026". Throws on anything else. */
export function formatMailDay(day: string, locale: string) {
  const date = DateTime.fromFormat(day, "yyyy-MM-dd", { zone: "utc", locale });
  if (!date.isValid) throw new Error("A day in a mail must be a calendar date such as 2026-10-06");
  return date.toLocaleString(DateTime.DATE_HUGE);
}

/** An instant as local day and time of the organisation: "9 October 2026 at 18:00". */
export function formatMailInstant(instant: Date, timeZone: string, locale: string) {
  const local = DateTime.fromJSDate(instant, { zone: timeZone }).setLocale(locale);
  if (!local.isValid) throw new Error("An instant in a mail needs a real date and a known time zone");
  return local.toLocaleString({ dateStyle: "long", timeStyle: "short" });
}
