import { randomUUID } from "node:crypto";
import { may } from "~/features/accounts/permissions";
import type { MemberScope } from "~/features/accounts/scope.server";
import { audit } from "~/platform/audit.server";
import { dayIn, timeIn } from "~/platform/clock";
import { sealer } from "~/platform/crypto/keys.server";
import { forbidden } from "~/platform/errors";
import { once } from "~/platform/operations.server";
import { type Tx, write } from "~db/client.server";
import type { PlanInput } from "./programme.schema";
import type { Plan } from "./programme-plan";
import { findPlans, insertPlan } from "./programme-plans.queries.server";

const placeOf = (id: string) => ({ table: "evaluation_plans", column: "plan", row: id, version: 1 });

/** Every plan of the organisation in the order in which they were recorded. */
export async function listPlans(tx: Tx): Promise<Plan[]> {
  const seals = await sealer(tx);
  const { timeZone } = tx.scope;
  return (await findPlans(tx)).map(({ plan, recordedAt, ...row }) => ({
    ...row,
    words: seals.open(placeOf(row.id), plan) ?? "",
    recordedOn: dayIn(timeZone, recordedAt),
    recordedTime: timeIn(timeZone, recordedAt),
  }));
}

/**
 * Records a plan for the organisation. Nothing is overwritten: an earlier plan stays and stays visible.
 * @throws DomainError forbidden for anybody but the medical lead; operation_mismatch for a form that was sent before
 *   and says something else now
 */
export function recordPlan(scope: MemberScope, { id = randomUUID(), ...input }: PlanInput) {
  if (!may(scope.roles, "rates.plan")) throw forbidden();
  const { words, ...outcome } = input;
  return write(scope, async (tx) => {
    const plan = (await sealer(tx)).sealRequired(placeOf(id), words);
    return once(tx, id, input, async () => {
      await insertPlan(tx, { id, plan, ...outcome });
      await audit(tx, { action: "evaluation_plan.record", subjectId: id, fields: outcome });
      return { id };
    });
  });
}
