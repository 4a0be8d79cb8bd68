import { describe, expect, it } from "vitest";
import { type EarlierInjury, recurrenceTiming, suggestSubsequence } from "~/features/injuries/subsequence";

const knee = { bodyArea: "knee", side: "left", pathology: "sprain", acl: false } as const;
const now = { ...knee, onsetDay: "2026-09-10" };
const earlier = (given: Partial<EarlierInjury> = {}): EarlierInjury => ({
  ...knee,
  id: "earlier",
  onsetDay: "2026-01-10",
  returnDay: "2026-03-01",
  year: null,
  ...given,
});

describe("subsequent injuries", () => {
  it("is the first without any earlier one", () => {
    expect(suggestSubsequence(now, [])).toMatchObject({ subsequence: "index", to: null });
  });

  it("is recurrent at the same area, side and type once the earlier one had ended", () => {
    expect(suggestSubsequence(now, [earlier()])).toMatchObject({
      subsequence: "recurrent",
      to: "earlier",
      timing: "late",
    });
  });

  it("is an exacerbation while the earlier one had not ended", () => {
    expect(suggestSubsequence(now, [earlier({ returnDay: null })])).toMatchObject({
      subsequence: "exacerbation",
      to: "earlier",
      timing: null,
    });
    expect(suggestSubsequence(now, [earlier({ returnDay: "2026-09-20" })]).subsequence).toBe("exacerbation");
  });

  it.each([
    ["2026-03-01", "2026-03-02", "early"],
    ["2026-03-01", "2026-05-01", "early"],
    ["2026-03-01", "2026-05-02", "late"],
    ["2025-12-31", "2026-02-28", "early"],
    ["2025-12-31", "2026-03-01", "late"],
    ["2025-09-10", "2026-09-10", "late"],
    ["2025-09-09", "2026-09-10", "delayed"],
  ] as const)("with a return on %s and an onset on %s it is %s", (returnDay, onsetDay, timing) => {
    expect(recurrenceTiming(returnDay, onsetDay)).toBe(timing);
  });

  it("is local at the same area and side with another type", () => {
    expect(suggestSubsequence(now, [earlier({ pathology: "cartilage" })]).subsequence).toBe("local");
  });

  it("is at another site else, also on the other side of the same area", () => {
    expect(suggestSubsequence(now, [earlier({ bodyArea: "ankle" })]).subsequence).toBe("other_site");
    expect(suggestSubsequence(now, [earlier({ side: "right" })])).toMatchObject({
      subsequence: "other_site",
      to: "earlier",
      contralateralAcl: false,
    });
  });

  it("takes both sides for either, and a midline area for one place", () => {
    expect(suggestSubsequence({ ...now, side: "both" }, [earlier()]).subsequence).toBe("recurrent");
    const head = { bodyArea: "head", side: "none", pathology: "concussion" } as const;
    expect(suggestSubsequence({ ...now, ...head }, [earlier(head)]).subsequence).toBe("recurrent");
  });

  it("waits for the type or the side instead of guessing", () => {
    expect(suggestSubsequence({ ...now, pathology: null }, [earlier()])).toMatchObject({
      subsequence: null,
      waitsFor: "pathology",
    });
    expect(suggestSubsequence(now, [earlier({ pathology: null })]).waitsFor).toBe("pathology");
    expect(suggestSubsequence({ ...now, side: "unknown" }, [earlier()]).waitsFor).toBe("side");
  });

  it("prefers the same kind over the same place, and the newest of several", () => {
    const rows = [
      earlier({ id: "old" }),
      earlier({ id: "new", onsetDay: "2026-06-01", returnDay: "2026-08-01" }),
      earlier({ id: "other", pathology: "cartilage", onsetDay: "2026-08-20", returnDay: "2026-08-30" }),
    ];
    expect(suggestSubsequence(now, rows)).toMatchObject({
      subsequence: "recurrent",
      to: "new",
      timing: "early",
    });
  });

  it("counts injuries from before Haleside, delayed only when the years leave no doubt", () => {
    const fromYear = (year: number | null) => earlier({ id: null, onsetDay: null, returnDay: null, year });
    expect(suggestSubsequence(now, [fromYear(2024)])).toMatchObject({
      subsequence: "recurrent",
      to: null,
      timing: "delayed",
    });
    expect(suggestSubsequence(now, [fromYear(2025)]).timing).toBeNull();
    expect(suggestSubsequence(now, [fromYear(null)]).timing).toBeNull();
  });

  it("points out the opposite knee after an anterior cruciate ligament injury, and only that", () => {
    const acl = earlier({ id: null, acl: true, side: "right", onsetDay: null, returnDay: null, year: 2023 });
    expect(suggestSubsequence(now, [acl])).toMatchObject({
      subsequence: "other_site",
      contralateralAcl: true,
    });
    expect(suggestSubsequence(now, [{ ...acl, side: "left" }]).contralateralAcl).toBe(false);
    expect(suggestSubsequence({ ...now, bodyArea: "ankle" }, [acl]).contralateralAcl).toBe(false);
    expect(suggestSubsequence({ ...now, side: "unknown" }, [acl]).contralateralAcl).toBe(false);
  });
});
