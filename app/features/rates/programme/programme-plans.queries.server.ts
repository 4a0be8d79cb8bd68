import { and, asc, eq, sql } from "drizzle-orm";
import type { Tx } from "~db/client.server";
import { evaluationPlans, memberships } from "~db/schema";
import type { CaseDefinition, ContactChoice, OnsetChoice } from "../filters";
import type { PlanComparison } from "./programme-plan";

/** The stored plans, the oldest first; their text is sealed. */
export function findPlans(tx: Tx) {
  return tx
    .select({
      id: evaluationPlans.id,
      area: evaluationPlans.area,
      contact: sql<ContactChoice>`${evaluationPlans.contact}`,
      onset: sql<OnsetChoice>`${evaluationPlans.onset}`,
      caseDefinition: sql<CaseDefinition>`${evaluationPlans.caseDefinition}`,
      comparison: sql<PlanComparison>`${evaluationPlans.comparison}`,
      plan: evaluationPlans.plan,
      recordedBy: memberships.displayName,
      recordedAt: evaluationPlans.recordedAt,
    })
    .from(evaluationPlans)
    .leftJoin(
      memberships,
      and(
        eq(memberships.organisationId, evaluationPlans.organisationId),
        eq(memberships.personId, evaluationPlans.recordedBy),
      ),
    )
    .where(eq(evaluationPlans.organisationId, tx.scope.organisationId))
    .orderBy(asc(evaluationPlans.recordedAt), asc(evaluationPlans.id));
}

type PlanRow = Pick<
  typeof evaluationPlans.$inferInsert,
  "id" | "area" | "contact" | "onset" | "caseDefinition" | "comparison" | "plan"
>;

export async function insertPlan(tx: Tx, row: PlanRow) {
  const { organisationId, personId } = tx.scope;
  await tx.insert(evaluationPlans).values({ organisationId, ...row, recordedBy: personId });
}
