import { foreignKey, index, pgTable, primaryKey, text, uuid } from "drizzle-orm/pg-core";
import { organisations } from "./accounts";
import { oneOf } from "./check";
import { bodyAreas } from "./codes";
import { actor, instant, organisationId, sealed } from "./columns";

/** "without": non-contact and indirect contact together, as prevention counts them. */
export const planContacts = ["any", "without", "non_contact", "indirect", "direct", "unknown"] as const;
export const planOnsets = ["any", "sudden", "gradual"] as const;
export const planDefinitions = ["time-loss", "medical-attention"] as const;
/** Which comparison answers the question; the other one is secondary. */
export const planComparisons = ["warmed-up", "thirds"] as const;

/**
 * What the medical lead wrote down before looking whether the warm-up programme works: the injuries that decide (primary
 * outcome), the comparison, the plan. Insert-only: a plan changed later is a further row, and both are shown for ever.
 */
export const evaluationPlans = pgTable(
  "evaluation_plans",
  {
    organisationId: organisationId(),
    id: uuid("id").notNull(),
    area: text("area").notNull(),
    contact: text("contact").notNull(),
    onset: text("onset").notNull(),
    caseDefinition: text("case_definition").notNull(),
    comparison: text("comparison").notNull(),
    /** In the lead's own words, which may name somebody. */
    plan: sealed("plan").notNull(),
    recordedBy: actor("recorded_by"),
    recordedAt: instant("recorded_at").notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.organisationId, t.id] }),
    foreignKey({
      name: "evaluation_plans_organisation_fk",
      columns: [t.organisationId],
      foreignColumns: [organisations.organisationId],
    }),
    index("evaluation_plans_recorded_idx").on(t.organisationId, t.recordedAt),
    oneOf("evaluation_plans_area", t.area, ["any", ...bodyAreas]),
    oneOf("evaluation_plans_contact", t.contact, planContacts),
    oneOf("evaluation_plans_onset", t.onset, planOnsets),
    oneOf("evaluation_plans_definition", t.caseDefinition, planDefinitions),
    oneOf("evaluation_plans_comparison", t.comparison, planComparisons),
  ],
);
