import { describe, expect, it } from "vitest";
import {
  cautionsFor,
  cautionsOfKinds,
  type Seen,
  safeDefaultReasons,
  signGroups,
  suggestUrgency,
} from "~/features/injuries/cautions";
import { bodyAreas, signs } from "~db/schema/codes";

const seen = (given: Partial<Seen>): Seen => ({
  bodyArea: "ankle",
  signs: [],
  suspectedConcussion: false,
  couldContinue: true,
  ...given,
});
const kinds = (given: Partial<Seen>) => cautionsFor(seen(given)).map(({ kind }) => kind);

describe("cautions", () => {
  it("asks for nothing when nothing was seen", () => {
    expect(kinds({})).toEqual([]);
    expect(safeDefaultReasons(seen({}))).toEqual([]);
    expect(suggestUrgency(seen({}))).toBe("routine");
  });

  it("puts every sign into exactly one group", () => {
    const grouped = [...signGroups.joint, ...signGroups.limb, ...signGroups.head];
    expect([...grouped].sort()).toEqual([...signs].sort());
  });

  it("holds a suspected concussion out for the day, never alone", () => {
    const [caution] = cautionsFor(seen({ bodyArea: "head", suspectedConcussion: true }));
    expect(caution?.text).toMatch(/without exception/);
    expect(caution?.text).toMatch(/never left alone/);
    expect(safeDefaultReasons(seen({ suspectedConcussion: true }))).toEqual(["concussion"]);
  });

  it.each([...signGroups.head])("calls the emergency services for %s, and suspects a concussion", (sign) => {
    expect(kinds({ bodyArea: "head", signs: [sign] })).toEqual(["emergency_head", "concussion"]);
    expect(safeDefaultReasons(seen({ signs: [sign] }))).toEqual(["concussion", "emergency"]);
  });

  it.each([...signGroups.limb])(
    "calls the emergency services for %s and leaves the limb as it lies",
    (sign) => {
      const cautions = cautionsFor(seen({ signs: [sign] }));
      expect(cautions.map(({ kind }) => kind)).toEqual(["emergency_limb"]);
      expect(cautions[0]?.text).toMatch(/do not move or splint/);
      expect(safeDefaultReasons(seen({ signs: [sign] }))).toEqual(["emergency"]);
    },
  );

  it.each([...signGroups.joint])("treats a knee with %s as a serious injury", (sign) => {
    expect(safeDefaultReasons(seen({ bodyArea: "knee", signs: [sign] }))).toEqual(["serious_knee"]);
    const sameDay = sign === "locked" || sign === "cannot_bear_weight";
    expect(kinds({ bodyArea: "knee", signs: [sign] })).toEqual([sameDay ? "knee_today" : "knee"]);
    expect(cautionsFor(seen({ bodyArea: "knee", signs: [sign] }))[0]?.text).toMatch(
      sameDay ? /should see them today\.$/ : /as soon as possible\.$/,
    );
  });

  it("does not speak of a knee elsewhere", () => {
    for (const bodyArea of bodyAreas.filter((area) => area !== "knee"))
      expect(kinds({ bodyArea, signs: ["pop", "swelling"] })).toEqual([]);
  });

  it("makes whoever could not continue unavailable, and nobody for an answer that is missing", () => {
    expect(safeDefaultReasons(seen({ couldContinue: false }))).toEqual(["could_not_continue"]);
    expect(safeDefaultReasons(seen({ couldContinue: null }))).toEqual([]);
  });

  it("names every reason, the emergency first among the cautions", () => {
    const all = seen({
      bodyArea: "knee",
      signs: ["pop", "deformity"],
      suspectedConcussion: true,
      couldContinue: false,
    });
    expect(cautionsFor(all).map(({ kind }) => kind)).toEqual(["emergency_limb", "concussion", "knee"]);
    expect(safeDefaultReasons(all)).toEqual([
      "concussion",
      "emergency",
      "serious_knee",
      "could_not_continue",
    ]);
    expect(suggestUrgency(all)).toBe("urgent");
  });

  it("finds cautions by their kinds again and ignores what it does not know", () => {
    expect(cautionsOfKinds(["knee", "nonsense", "concussion"]).map(({ kind }) => kind)).toEqual([
      "concussion",
      "knee",
    ]);
  });
});
