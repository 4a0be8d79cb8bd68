import { stableFrom } from "../coverage";
import type { RateUnit } from "../filters";
import type { RateRow } from "../rates";
import { unitWords } from "../sentence";
import { type Cell, figure, type TableColumn, type TableData } from "../tables";
import type { TeamRate, TeamRates } from "./team-rates";

const text = (id: string, header: string): TableColumn => ({ id, header, kind: "text" });
const count = (id: string, header: string): TableColumn => ({ id, header, kind: "count" });

/** Where a team lies, in words: "above 95 %", "below 99.8 %". */
export function outsideWords({ outside: [inner, outer], row, shrunken }: TeamRate): string | null {
  if (!row.rate || !shrunken) return null;
  if (outer) return `${outer} 99.8 %`;
  return inner ? `${inner} 95 %` : "within";
}

const rateCell = ({ rate, reason, unstable }: RateRow): Cell =>
  rate ? figure(rate, unstable) : { reason: reason ?? "no rate" };

/** Teams with their crude and shrunken rates, and the whole below. */
export function teamsTable(
  { teams, whole, wholeHidden, injuries, exposure }: TeamRates,
  unit: RateUnit,
  wholeName: string,
): TableData {
  const perUnit = `per ${unitWords[unit]}`;
  return {
    id: "teams",
    caption: "Teams against the whole",
    columns: [
      text("team", "Team"),
      count("injuries", "Injuries"),
      count("exposure", unit === "aes" ? "Exposures" : "Hours"),
      { id: "rate", header: "Rate", kind: "figure", form: "rate", unit: perUnit, bar: true },
      text("outside", "Limits"),
      { id: "shrunken", header: "Shrunken rate", kind: "figure", form: "rate", unit: perUnit },
    ],
    rows: [
      ...teams.map((team) => {
        const { row, shrunken } = team;
        return {
          key: row.key,
          cells: {
            team: row.label,
            injuries: row.injuries,
            exposure: row.denominator,
            rate: rateCell(row),
            outside: outsideWords(team),
            shrunken: shrunken ? figure(shrunken) : null,
          },
        };
      }),
      {
        key: "whole",
        total: true,
        cells: {
          team: wholeName,
          injuries: wholeHidden ? null : injuries,
          exposure: wholeHidden ? null : exposure,
          rate: whole
            ? figure(whole, injuries < stableFrom)
            : { reason: wholeHidden ? "hidden: it would tell a single other team's" : "no rate" },
          ...{ outside: null, shrunken: null },
        },
      },
    ],
  };
}

/** What each team had over what the whole's rates let expect at its ages and in its kinds of session. */
export function expectedTable({ teams, wholeHidden }: TeamRates): TableData {
  return {
    id: "expected",
    caption: "Injuries over those expected at the whole's rates by age band and session kind",
    columns: [
      text("team", "Team"),
      count("injuries", "Injuries"),
      { id: "expected", header: "Expected", kind: "number", decimals: 2 },
      {
        ...{ id: "ratio", header: "Observed over expected", unit: "times" },
        ...{ kind: "figure", form: "ratio", bar: true },
      },
    ],
    rows: teams.map(({ row, expected, ratio }) => ({
      key: row.key,
      cells: {
        team: row.label,
        injuries: row.injuries,
        expected: expected?.estimate ?? null,
        ratio: ratio
          ? figure(ratio, row.unstable)
          : {
              reason: expected
                ? "nothing expected"
                : (row.reason ?? (wholeHidden ? "the whole is hidden" : "needs three teams")),
            },
      },
    })),
  };
}
