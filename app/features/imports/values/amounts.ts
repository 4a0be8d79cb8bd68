import { foldText } from "~/platform/fold-text";
import { accept, type Parsed, quoteCell, refuse, tidyCell } from "./parsed";

/** Longest session that is believed, in minutes. */
export const mostMinutes = 600;
/** Most athletes of one session that are believed. */
export const mostPlayers = 500;

const decimal = /^([+-]?\d{1,6})(?:[.,](\d{1,2}))?$/u;
const clock = /^(-?\d{1,3}):(\d{2})(?::(\d{2}))?(?:\s*h)?$/u;
const minutesUnit =
  /^(-?\d+(?:[.,]\d{1,2})?)\s*(?:m|min|mins|min\.|minute|minutes|minuten|minutos|minut|minuty|munud|'|′)$/iu;
const hoursUnit =
  /^(-?\d+(?:[.,]\d{1,2})?)\s*(?:h|hr|hrs|hour|hours|std|stunde|stunden)\.?(?:\s*(\d{1,2})\s*(?:m|min|mins|minutes|minuten)?\.?)?$/iu;
const smallWords = [
  ["zero", "null"],
  ["one", "eins"],
  ["two", "zwei"],
  ["three", "drei"],
  ["four", "vier"],
  ["five", "funf"],
  ["six", "sechs"],
  ["seven", "sieben"],
  ["eight", "acht"],
  ["nine", "neun"],
  ["ten", "zehn"],
  ["eleven", "elf"],
  ["twelve", "zwolf"],
  ["thirteen", "dreizehn"],
  ["fourteen", "vierzehn"],
  ["fifteen", "funfzehn"],
  ["sixteen", "sechzehn"],
  ["seventeen", "siebzehn"],
  ["eighteen", "achtzehn"],
  ["nineteen", "neunzehn"],
];
const tensWords = ["twenty", "thirty", "forty", "fifty", "sixty", "seventy", "eighty", "ninety"];

/**
 * Reads a duration and gives minutes, to two decimals: "80", "80,0", "80 min", "1:20", "01:20:00", "1h20",
 * "1 h 20 min", "1,5 h". Refuses negative ones and more than 600.
 */
export function parseMinutes(text: string): Parsed<number> {
  const cell = tidyCell(text);
  const minutes = readMinutes(cell);
  if (minutes === undefined)
    return refuseNumber("minutes", text, "Write the minutes, for example 80 or 1:20.");
  if (minutes < 0 || cell.startsWith("-")) {
    return refuse(
      "minutes.negative",
      `${quoteCell(text)} is less than no time.`,
      "Write the minutes without a sign.",
    );
  }
  if (minutes > mostMinutes) {
    return refuse(
      "minutes.too-many",
      `${quoteCell(text)} is more than ${mostMinutes} minutes, which no session lasts.`,
      "Correct the minutes, or say hours and minutes as 1:20.",
    );
  }
  const rounded = Math.round(minutes * 100) / 100;
  if (Number.isInteger(rounded) || !decimal.test(cell)) return accept(rounded);
  return accept(
    rounded,
    `${quoteCell(text)} was read as minutes, with a part of a minute: check that it is not hours.`,
  );
}

/** Reads how many athletes took part: a whole number up to 500. */
export function parsePlayers(text: string): Parsed<number> {
  const match = decimal.exec(tidyCell(text));
  if (!match)
    return refuseNumber("players", text, "Write the number of athletes in figures, for example 14.");
  const players = Number(match[1]);
  if (Number(match[2] ?? 0) !== 0) {
    return refuse(
      "players.part",
      `${quoteCell(text)} is not a whole number of athletes.`,
      "Write a whole number.",
    );
  }
  if (players < 0) {
    return refuse(
      "players.negative",
      `${quoteCell(text)} is less than nobody.`,
      "Write the number without a sign.",
    );
  }
  if (players > mostPlayers) {
    return refuse(
      "players.too-many",
      `${quoteCell(text)} is more than ${mostPlayers} athletes in one session.`,
      "Correct the number of athletes.",
    );
  }
  return accept(
    players,
    players === 0 ? "Nobody took part in this session: it adds no exposure." : undefined,
  );
}

function readMinutes(cell: string): number | undefined {
  const plain = decimal.exec(cell);
  if (plain) return toNumber(cell);
  const withMinutes = minutesUnit.exec(cell);
  if (withMinutes?.[1]) return toNumber(withMinutes[1]);
  const hours = hoursUnit.exec(cell);
  if (hours?.[1]) return addHours(toNumber(hours[1]), Number(hours[2] ?? 0));
  const time = clock.exec(cell);
  if (!time) return undefined;
  return addHours(Number(time[1]), Number(time[2]), Number(time[3] ?? 0));
}

function addHours(hours: number, minutes: number, seconds = 0) {
  if (minutes > 59 || seconds > 59) return undefined;
  if (!Number.isInteger(hours) && minutes > 0) return undefined;
  return hours * 60 + minutes + seconds / 60;
}

function toNumber(text: string) {
  return Number(text.replace(",", "."));
}

function refuseNumber(what: string, text: string, otherwise: string): Parsed<number> {
  const number = readNumberWord(text);
  return refuse(
    `${what}.not-a-number`,
    `${quoteCell(text)} is not a number.`,
    number === undefined ? otherwise : `Write ${number}.`,
  );
}

/** A number in words (English up to ninety-nine, German up to nineteen), for the mend only. */
function readNumberWord(text: string): number | undefined {
  const [first = "", second, ...more] = foldText(text).split(" ");
  if (more.length > 0) return undefined;
  const small = (word: string) => smallWords.findIndex((words) => words.includes(word));
  const tens = tensWords.indexOf(first);
  if (tens === -1) return second === undefined && small(first) !== -1 ? small(first) : undefined;
  const ones = second === undefined ? 0 : small(second);
  return ones >= 0 && ones < 10 ? (tens + 2) * 10 + ones : undefined;
}
