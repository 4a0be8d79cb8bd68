import { beforeAll, expect, it } from "vitest";
import { proposeWarmedUp } from "~/features/warm-ups/warm-up-part.server";
import { read } from "~db/client.server";
import { makeClub, makeSession, makeWarmUp } from "../../harness";

let club: Awaited<ReturnType<typeof makeClub>>;

beforeAll(async () => {
  club = await makeClub();
});

/** A training at 17:30 with its warm-up record, and what it proposes for the club's athlete hurt at a time. */
async function proposal(record: Parameters<typeof makeWarmUp>[1] | null, onsetTime: string | null) {
  const { team, athlete, staff, scopes } = club;
  const session = await makeSession(staff, {
    teamId: team.id,
    startTime: "17:30",
    minutes: { [athlete.id]: 60 },
  });
  if (record) await makeWarmUp(staff, { ...record, sessionId: session.id });
  return read(scopes.trainer, (tx) => proposeWarmedUp(tx, session, { athleteId: athlete.id, onsetTime }));
}

it("proposes yes for who took part in the recorded warm-up and was hurt after it", async () => {
  const record = { sessionId: "", athleteIds: [club.athlete.id], minutes: 20 };
  expect(await proposal(record, "18:10")).toBe(true);
  expect(await proposal(record, null)).toBe(true);
});

it("proposes no for a late arrival, during the warm-up, and where it was skipped", async () => {
  expect(await proposal({ sessionId: "", athleteIds: [] }, "18:10")).toBe(false);
  expect(await proposal({ sessionId: "", athleteIds: [club.athlete.id], minutes: 20 }, "17:45")).toBe(false);
  const skipped = { sessionId: "", outcome: "skipped", blocks: [], skipReason: "weather" };
  expect(await proposal(skipped, "18:10")).toBe(false);
});

it("proposes nothing where the warm-up is not recorded", async () => {
  expect(await proposal(null, "18:10")).toBeNull();
});
