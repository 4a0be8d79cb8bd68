import type { ExposureCell, InjuryRow } from "~/features/rates/counting";
import type { SessionTally } from "~/features/rates/coverage";
import type { Counts } from "~/features/rates/selection";

/** Counts put together by hand for the pure tests of rates. */

export const injury = (given: Partial<InjuryRow> = {}): InjuryRow => ({
  id: "i",
  athleteId: "a",
  sex: "female",
  age: 15,
  onsetDay: "2026-10-05",
  day: "2026-10-05",
  sessionId: "s",
  contact: "non_contact",
  movement: "cutting",
  bodyArea: "knee",
  side: "left",
  tissue: null,
  pathology: null,
  warmedUp: null,
  onset: "sudden",
  subsequence: "index",
  outsideSport: false,
  withdrawn: false,
  teamId: "t",
  sessionKind: "training",
  sessionState: "held",
  sessionAes: true,
  sessionHours: true,
  weekAes: true,
  weekHours: true,
  daysLost: 3,
  ongoing: false,
  ...given,
});

export const cell = (given: Partial<ExposureCell> = {}): ExposureCell => ({
  teamId: "t",
  day: "2026-10-05",
  kind: "training",
  grade: "recorded",
  sex: "female",
  age: 15,
  aes: 1000,
  hours: 1400,
  ...given,
});

export const tally = (given: Partial<SessionTally> = {}): SessionTally => ({
  teamId: "t",
  day: "2026-10-05",
  kind: "training",
  held: 10,
  recorded: 10,
  headcount: 0,
  estimated: 0,
  withoutExposure: 0,
  unconfirmed: 0,
  cancelled: 0,
  ...given,
});

export const counts = (given: Partial<Counts> = {}): Counts => ({
  from: "2026-08-01",
  to: "2026-12-01",
  seasons: [{ id: "y", name: "2026/27", startsOn: "2026-08-01", endsOn: "2027-06-30" }],
  cells: [],
  silent: [],
  injuries: [],
  sessions: [tally()],
  teams: [{ id: "t", name: "Girls U16", sport: "soccer", sex: "girls" }],
  confirmedWeeks: [],
  bands: [
    { label: "13-14", from: 13, to: 14 },
    { label: "15-16", from: 15, to: 16 },
    { label: "over 16", from: 17, to: null },
  ],
  ...given,
});

export const several = (count: number, given: Partial<InjuryRow> = {}) =>
  Array.from({ length: count }, (_, index) => injury({ id: `${given.sex} ${index}`, ...given }));
