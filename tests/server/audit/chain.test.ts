import { beforeAll, expect, it } from "vitest";
import { checkAudit, sealAudit } from "~/features/audit/audit.server";
import { audit } from "~/platform/audit.server";
import { write } from "~db/client.server";
import { maintenance, makeClub, scopeOf } from "../../harness";

let club: Awaited<ReturnType<typeof makeClub>>;
const jobScope = () => scopeOf(club.organisation, ["job"]);

beforeAll(async () => {
  club = await makeClub();
  for (const action of ["roster.read", "injury.read", "injury.edit"])
    await write(club.scopes.trainer, (tx) =>
      audit(tx, { action, athleteId: club.athlete.id, fields: { fields: ["side", "onset"], version: 2 } }),
    );
});

it("seals every event once, in order, however often the job runs", async () => {
  await sealAudit(jobScope());
  await sealAudit(jobScope());
  const [counts] = await maintenance()<{ events: number; seals: number; last: number }[]>`
    select (select count(*)::int from audit_events) as events, count(*)::int as seals, max(position)::int as last
    from audit_seals`;
  expect(counts?.events).toBeGreaterThanOrEqual(3);
  expect(counts?.seals).toBe(counts?.events);
  expect(counts?.last).toBe(counts?.events);
  expect(await checkAudit(jobScope())).toBeNull();
});

it("finds an event that was changed behind the application's back, and continues from an unbroken chain", async () => {
  await write(club.scopes.lead, (tx) => audit(tx, { action: "injury.read" }));
  await sealAudit(jobScope());
  expect(await checkAudit(jobScope())).toBeNull();
  const [second] = await maintenance()<{ id: string }[]>`
    select event_id as id from audit_seals where position = 2`;
  await maintenance()`update audit_events set action = 'nothing.happened' where id = ${second?.id ?? ""}`;
  expect(await checkAudit(jobScope())).toBe(2);
});
