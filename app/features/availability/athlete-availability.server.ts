import { may } from "~/features/accounts/permissions";
import type { MemberScope } from "~/features/accounts/scope.server";
import { audit } from "~/platform/audit.server";
import { dayIn, timeIn } from "~/platform/clock";
import { DomainError, forbidden, notFound } from "~/platform/errors";
import { write } from "~db/client.server";
import { stateFromContributions } from "./availability";
import {
  findChanges,
  findReason,
  findReasonContributions,
  findReasons,
  findVisibleAthlete,
} from "./availability.queries.server";
import type { AvailabilityChange } from "./availability.schema";
import { changeAvailability, openReason, stateOfDay } from "./availability.server";

/** The athlete's availability for a clinical role: every reason with what it says, and the state of today. */
export function readAthleteAvailability(scope: MemberScope, athleteId: string) {
  if (!may(scope.roles, "availability.write")) throw forbidden();
  return write(scope, async (tx) => {
    const athlete = await findVisibleAthlete(tx, athleteId);
    if (!athlete) throw notFound("That athlete");
    const reasons = await findReasons(tx, athleteId);
    const ids = reasons.map(({ id }) => id);
    const parts = ids.length > 0 ? await findReasonContributions(tx, ids) : [];
    const changes = await findChanges(tx, ids);
    const state = (await stateOfDay(tx, [athleteId], scope.today)).get(athleteId);
    await audit(tx, { action: "availability.read", athleteId, fields: { reasons: reasons.length } });
    return {
      athlete: { id: athlete.id, name: `${athlete.givenName} ${athlete.familyName}` },
      today: scope.today,
      state: state && {
        ...state,
        asOf: state.asOf && {
          day: dayIn(scope.timeZone, state.asOf),
          time: timeIn(scope.timeZone, state.asOf),
        },
      },
      reasons: reasons.map(({ id, cause, injuryId, reportId }) => {
        const own = parts.filter(({ reasonId }) => reasonId === id);
        const last = changes.filter(({ reasonId }) => reasonId === id).at(-1);
        return {
          id,
          cause,
          injuryId,
          reportId,
          now: stateFromContributions(own, scope.today),
          holds: own.some(
            ({ toDay, state: kind }) => kind !== "full" && (toDay === null || toDay >= scope.today),
          ),
          course: own.map(({ fromDay, toDay, state: kind, restrictions, minutesLimit, expectedOn }) => ({
            fromDay,
            toDay,
            state: kind,
            restrictions,
            minutesLimit,
            expectedOn,
          })),
          lastSet: last
            ? {
                by: last.setBy,
                day: dayIn(scope.timeZone, last.setAt),
                time: timeIn(scope.timeZone, last.setAt),
              }
            : null,
        };
      }),
    };
  });
}

/**
 * Changes one reason of the athlete, or opens a new one that is no injury.
 * @param target the reason's id, or the cause of a new one
 * @throws DomainError forbidden, not_found, conflict for a reason that an injury's page keeps
 */
export function setAthleteAvailability(
  scope: MemberScope,
  athleteId: string,
  target: { reasonId: string } | { cause: "illness" | "other" },
  change: AvailabilityChange,
): Promise<void> {
  if (!may(scope.roles, "availability.write")) throw forbidden();
  return write(scope, async (tx) => {
    if (!(await findVisibleAthlete(tx, athleteId))) throw notFound("That athlete");
    if ("cause" in target) {
      if (change.state === "full")
        throw new DomainError("invalid", "", {
          fields: { state: ["A new reason limits something. Choose modified or unavailable."] },
        });
      await openReason(tx, { athleteId, cause: target.cause, change });
      return;
    }
    const reason = await findReason(tx, target.reasonId);
    if (!reason || reason.athleteId !== athleteId) throw notFound("That reason");
    if (reason.injuryId)
      throw new DomainError(
        "conflict",
        "This availability belongs to an injury. Change it on the injury's page.",
      );
    await changeAvailability(tx, reason.id, change);
  });
}
