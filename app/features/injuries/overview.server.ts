import {
  type Contribution,
  type DayState,
  stateFromContributions,
  timeLossOf,
} from "~/features/availability/availability";
import { contributionsOfInjuries } from "~/features/availability/availability.server";
import { dayIn, daysBetween } from "~/platform/clock";
import type { Sealer } from "~/platform/crypto/keys.server";
import { type SeverityBand, severityBand, type TimeLoss } from "~/statistics";
import type { Tx } from "~db/client.server";
import { type Gap, gapsOf } from "./gaps";
import {
  findInjuriesBefore,
  findInjuriesOf,
  findTeamsAtOnset,
  type InjuryRow,
  type Revision,
} from "./injuries.queries.server";

/** Where the sealed text of a revision belongs. */
export const revisionPlace = (
  column: "phoned" | "diagnosis" | "description",
  injuryId: string,
  version: number,
) => ({
  table: "injury_revisions",
  column,
  row: injuryId,
  version,
});

export type Opened = { phoned: string | null; diagnosis: string | null; description: string | null };

/** The sealed texts of a revision in clear. */
export function openRevision(seals: Sealer, revision: Revision): Opened {
  const open = (column: keyof Opened) =>
    seals.open(revisionPlace(column, revision.injuryId, revision.version), revision[column]);
  return { phoned: open("phoned"), diagnosis: open("diagnosis"), description: open("description") };
}

export type InjuryOverview = InjuryRow & {
  /** Teams: of its session, else those of the athlete on the day of the onset. */
  teams: string[];
  contributions: (Contribution & { setAt: Date })[];
  timeLoss: TimeLoss;
  severity: SeverityBand;
  /** What this injury allows today. */
  today: DayState;
  gaps: Gap[];
  open: boolean;
};

/** The day up to which the time loss of an injury is known: leaving the organisation ends it, and censors it. */
function knownUntil({ timeZone }: Tx["scope"], { athlete, revision }: InjuryRow, asOf: string) {
  const left = athlete.archivedAt && dayIn(timeZone, athlete.archivedAt);
  if (!left || left >= asOf) return asOf;
  const days = [left, revision.onsetDay].sort();
  return days[1] ?? asOf;
}

/** Adds what follows from the rules to rows of injuries: time loss to today, severity, gaps, teams. */
export async function overviewsOf(tx: Tx, rows: readonly InjuryRow[]): Promise<InjuryOverview[]> {
  const { today } = tx.scope;
  const ids = rows.map(({ id }) => id);
  const athleteIds = [...new Set(rows.map(({ athleteId }) => athleteId))];
  const contributions = await contributionsOfInjuries(tx, ids);
  const all = await findInjuriesOf(tx, athleteIds);
  const before = await findInjuriesBefore(tx, athleteIds);
  const teamRows = await findTeamsAtOnset(
    tx,
    rows.filter(({ session }) => !session).map(({ id }) => id),
  );
  return rows.map((row) => {
    const { revision } = row;
    const parts = contributions.get(row.id) ?? [];
    // An onset entered for a later day than today by another clock is counted from itself.
    const asOf = daysBetween(today, revision.onsetDay) > 0 ? revision.onsetDay : today;
    const loss = timeLossOf(revision.onsetDay, parts, knownUntil(tx.scope, row, asOf));
    const hasEarlier =
      before.some(({ athleteId }) => athleteId === row.athleteId) ||
      all.some(
        (other) =>
          other.athleteId === row.athleteId &&
          other.id !== row.id &&
          other.revision.onsetDay < revision.onsetDay,
      );
    return {
      ...row,
      teams: row.session
        ? [row.session.teamName]
        : teamRows.filter(({ injuryId }) => injuryId === row.id).map(({ teamName }) => teamName),
      contributions: parts,
      timeLoss: loss,
      severity: severityBand(loss.days),
      today: stateFromContributions(parts, asOf),
      gaps: gapsOf({ ...revision, hasAvailability: parts.length > 0, hasEarlier }),
      open: revision.closedOn === null,
    };
  });
}
