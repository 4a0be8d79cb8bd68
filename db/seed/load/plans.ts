import { addDays } from "~/platform/clock";
import { evaluationPlans } from "~db/schema";
import type { Loading } from "./loading";

/** Days before the season under way on which the plan was written. */
const ahead = 12;

const words = `We compare athlete-exposures of athletes who did the warm-up with those of athletes who did not, in training and in matches apart, over the whole season. Sessions whose warm-up nobody recorded stay apart. The thirds of compliance are read as a second look. We look once, after the season, and change nothing in the programme because of a look in between.`;

/** What the medical lead wrote down, before the season under way began, of how the programme will be judged. */
export async function loadPlans({ tx, own, organisationId, id, person, on, seals }: Loading) {
  const season = own.seasons.filter(({ from }) => from <= own.today).at(-1);
  const lead = own.memberships.find(({ role }) => role === "lead")?.person;
  if (!season || !lead) return;
  const planId = id("evaluation plan", season.key);
  await tx.insert(evaluationPlans).values({
    organisationId,
    id: planId,
    area: "knee",
    contact: "without",
    onset: "sudden",
    caseDefinition: "time-loss",
    comparison: "warmed-up",
    plan: seals.sealRequired({ table: "evaluation_plans", column: "plan", row: planId, version: 1 }, words),
    recordedBy: person(lead),
    recordedAt: on(addDays(season.from, -ahead), "10:00"),
  });
}
