/** How much of the exposure is really recorded, and what follows for the rates. Pure, and small enough for the browser. */

/** A rate on fewer injuries is unstable (product rule). */
export const stableFrom = 5;
/** Shares of held sessions with recorded exposure: below the first rates carry a warning, below the second none is shown. */
export const coverageWarning = 0.8;
export const coverageFloor = 0.5;

/** Sessions of one team, day and kind. */
export type SessionTally = {
  teamId: string;
  day: string;
  kind: "training" | "match";
  held: number;
  recorded: number;
  headcount: number;
  estimated: number;
  withoutExposure: number;
  unconfirmed: number;
  cancelled: number;
};

export type Coverage = {
  held: number;
  recorded: number;
  /** 0 to 1; null without held sessions. */
  share: number | null;
  state: "good" | "low" | "withheld" | "none";
};

export function coverageOf(tallies: readonly SessionTally[]): Coverage {
  const held = tallies.reduce((sum, row) => sum + row.held, 0);
  const recorded = tallies.reduce((sum, row) => sum + row.recorded, 0);
  if (held === 0) return { held, recorded, share: null, state: "none" };
  const share = recorded / held;
  const state = share < coverageFloor ? "withheld" : share < coverageWarning ? "low" : "good";
  return { held, recorded, share, state };
}

export const percent = (share: number) => `${Math.floor(share * 100)} %`;
