import { weekStart } from "~/platform/clock";
import type { ExposureCell, InjuryRow } from "./counting";
import { type SeasonDays, seasonOf } from "./periods";

/**
 * The exposure of a team's week counts within one season: in the week in which a season ends, a friendly after its
 * last day lets no gradual injury in. Asked for one season the database keeps to its days; asked for several in one
 * go it cannot, so that this is set right here.
 * @param cells exposure of the seasons' own days
 */
export function keepWeeksToSeasons(
  injuries: readonly InjuryRow[],
  cells: readonly ExposureCell[],
  seasons: readonly SeasonDays[],
): InjuryRow[] {
  const key = (teamId: string, day: string) => `${seasonOf(day, seasons)?.id} ${teamId} ${weekStart(day)}`;
  const weeks = new Map<string, { aes: boolean; hours: boolean }>();
  for (const { teamId, day, aes, hours } of cells) {
    const known = weeks.get(key(teamId, day));
    weeks.set(key(teamId, day), {
      aes: known?.aes || aes > 0,
      hours: known?.hours || hours > 0,
    });
  }
  return injuries.map((injury) => {
    const week = injury.teamId ? weeks.get(key(injury.teamId, injury.onsetDay)) : undefined;
    return { ...injury, weekAes: week?.aes ?? false, weekHours: week?.hours ?? false };
  });
}
