import { afterAll, expect, it } from "vitest";
import { startWorkers, stopWorkers } from "~/features/jobs.server";
import { maintenance, makeClub, makeInjury, makeSession, openMailbox } from "../../harness";

afterAll(stopWorkers);

async function countMarks(organisationId: string) {
  const [row] = await maintenance()<{ marks: number }[]>`
    select count(*)::int as marks from rollup_marks where organisation_id = ${organisationId}`;
  return row?.marks ?? Number.NaN;
}

async function until(isTrue: () => Promise<boolean>, seconds: number) {
  for (const end = Date.now() + seconds * 1000; Date.now() < end; ) {
    if (await isTrue()) return true;
    await new Promise((resolve) => setTimeout(resolve, 500));
  }
  return false;
}

// The clock looks every half minute; what it sends runs at the next look of the queue.
it("runs what is due by the clock, as the role that owns nothing", { timeout: 150_000 }, async () => {
  const { organisation, staff, team, athlete } = await makeClub();
  const session = await makeSession(staff, { teamId: team.id, minutes: { [athlete.id]: 90 } });
  await makeInjury(staff, { athleteId: athlete.id, sessionId: session.id });
  expect(await countMarks(organisation.id)).toBeGreaterThan(0);
  await openMailbox();
  await startWorkers();
  expect(await until(async () => (await countMarks(organisation.id)) === 0, 120)).toBe(true);
  const rows = await maintenance()`select 1 from exposure_rollup where organisation_id = ${organisation.id}`;
  expect(rows.length).toBeGreaterThan(0);
});
