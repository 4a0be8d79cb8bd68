import { describe, expect, it } from "vitest";
import {
  choose,
  inverseOf,
  isRecorded,
  openQueue,
  type Queue,
  settle,
  shownFields,
} from "~/features/warm-ups/record-queue";
import {
  creditedBlocks,
  fieldsOf,
  forbiddenBlocks,
  joinsByDefault,
  outcomeOf,
  stateFrom,
} from "~/features/warm-ups/warm-up";
import { warmUpBlocks } from "~db/schema/codes";

const empty = {
  recorded: false,
  blocks: [],
  skipReason: null,
  skipNote: null,
  minutes: null,
  ledBy: null,
  athleteIds: ["a", "b"],
};

describe("who may do which block", () => {
  it("leaves out what a restriction forbids", () => {
    expect(forbiddenBlocks(["no_cutting"])).toEqual(["cutting_planting"]);
    expect(forbiddenBlocks(["straight_running_only"])).toEqual(["jumping_landing", "cutting_planting"]);
    expect(forbiddenBlocks(["no_contact", "minutes_limit"])).toEqual([]);
    expect(creditedBlocks(["running", "jumping_landing"], ["no_jumping"])).toEqual(["running"]);
  });

  it("ticks everyone whose restrictions allow a block, never the unavailable", () => {
    expect(joinsByDefault({ state: "full", restrictions: [] })).toBe(true);
    expect(joinsByDefault({ state: "modified", restrictions: ["straight_running_only"] })).toBe(true);
    expect(joinsByDefault({ state: "modified", restrictions: ["non_weight_bearing"] })).toBe(false);
    expect(joinsByDefault({ state: "unavailable", restrictions: [] })).toBe(false);
  });
});

it("tells full, part, skipped and not recorded apart", () => {
  expect(outcomeOf({ blocks: warmUpBlocks, skipReason: null })).toBe("full");
  expect(outcomeOf({ blocks: ["running"], skipReason: null })).toBe("part");
  expect(outcomeOf({ blocks: [], skipReason: "weather" })).toBe("skipped");
  expect(outcomeOf({ blocks: [], skipReason: null })).toBe("not_recorded");
});

it("goes to flat fields and back", () => {
  const state = { ...empty, recorded: true, blocks: ["running" as const], minutes: 12, ledBy: "Ines" };
  expect(stateFrom(fieldsOf(state))).toEqual(state);
});

describe("the queue of a page", () => {
  const tick = (queue: Queue, chosen: Parameters<typeof choose>[3], id = "1") =>
    choose(queue, "s", id, chosen);

  it("keeps other choices as drafts until a block is ticked, and sends them along", () => {
    const drafted = tick(openQueue(empty), { "athlete:b": false });
    expect(drafted.waiting).toEqual([]);
    expect(shownFields(drafted)["athlete:b"]).toBe(false);
    const ticked = tick(drafted, { "block:running": true, skipReason: null });
    expect(ticked.drafts).toEqual({});
    expect(ticked.waiting[0]?.fields).toEqual({
      "block:running": { base: false, value: true },
      "athlete:b": { base: true, value: false },
      skipReason: { base: null, value: null },
    });
  });

  it("bases a second tick on the first, which still waits", () => {
    const first = tick(openQueue(empty), { "block:running": true });
    const second = tick(first, { "block:running": false }, "2");
    expect(second.waiting[1]?.fields["block:running"]).toEqual({ base: true, value: false });
    expect(isRecorded(shownFields(second))).toBe(false);
  });

  it("takes answers: what was stored stays, a conflict is shown with both values and leaves the queue", () => {
    const ticked = tick(openQueue(empty), { "block:running": true });
    const state = { ...empty, recorded: true, blocks: ["running", "balance"] };
    const saved = settle(ticked, [{ id: "1", status: "applied", result: { state } }]);
    expect(saved.waiting).toEqual([]);
    expect(shownFields(saved)).toMatchObject({ "block:running": true, "block:balance": true });

    const conflicts = [{ field: "minutes", base: null, stored: 12, value: 15 }];
    const other = settle(tick(saved, { minutes: 15 }, "2"), [{ id: "2", status: "conflict", conflicts }]);
    expect(other).toMatchObject({ waiting: [], conflicts });
    expect(shownFields(other).minutes).toBe(12);
  });

  it("shows a refusal and never sends it again", () => {
    const refused = settle(tick(openQueue(empty), { "block:running": true }), [
      { id: "1", status: "refused", message: "This session is cancelled." },
    ]);
    expect(refused).toMatchObject({ waiting: [], refusal: "This session is cancelled." });
    expect(shownFields(refused)["block:running"]).toBe(false);
  });

  it("ignores an answer to something it did not ask", () => {
    const queue = tick(openQueue(empty), { "block:running": true });
    expect(settle(queue, [{ id: "other", status: "applied", result: {} }])).toEqual(queue);
  });

  it("undoes a choice exactly", () => {
    const before = tick(openQueue(empty), { "block:running": true });
    const all = Object.fromEntries(warmUpBlocks.map((block) => [`block:${block}`, true]));
    const undone = tick(tick(before, all, "2"), inverseOf(shownFields(before), all), "3");
    expect(shownFields(undone)).toEqual(shownFields(before));
  });
});
