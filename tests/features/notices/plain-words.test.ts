import { describe, expect, it } from "vitest";
import { draftPlainWords, type NoticeFacts, sayArea, sayWhere } from "~/features/notices/plain-words";
import { textBlocks } from "~/features/notices/text-blocks";
import { bodyAreas, contacts, firstCare, movements, onsets, referrals, sides, signs } from "~db/schema/codes";
import { computeReadingGrade } from "../../server/mail/reading-grade";

const facts: NoticeFacts = {
  givenName: "Ines",
  bodyArea: "knee",
  side: "left",
  suspectedConcussion: false,
  couldContinue: null,
  onset: "sudden",
  contact: "non_contact",
  movement: "cutting",
  signs: [],
  firstCare: ["stopped_play", "ice"],
  referredTo: [],
};
const draft = (given: Partial<NoticeFacts> = {}) => draftPlainWords({ ...facts, ...given });
const whole = (words: ReturnType<typeof draft>) => Object.values(words).join("\n");

/** Reading age 11 is the end of grade 6. */
const mostGrade = 6;

describe("the draft of a notice", () => {
  it("says what happened as one would at home", () => {
    expect(draft({ signs: ["pop", "swelling"], couldContinue: false }).happened).toBe(
      "Ines hurt the left knee while turning fast. No one else was part of it. Ines heard or felt a pop. It is swollen. Ines had to stop.",
    );
    expect(draft({ onset: "gradual", contact: null, movement: "none" }).happened).toBe(
      "Ines has pain in the left knee. It came on bit by bit.",
    );
  });

  it("claims no care that nobody wrote down", () => {
    expect(draft({ firstCare: [] }).done).toBe("");
    expect(draft().done).toBe("Ines stopped playing. We cooled it.");
  });

  it("names every area and side in words of every day", () => {
    expect(sayArea("lumbosacral", "none")).toBe("the lower back");
    expect(sayArea("ankle", "both")).toBe("both ankles");
    expect(sayArea("head", "both")).toBe("the head");
    expect(sayArea("unspecified", "left")).toBeNull();
    for (const area of bodyAreas)
      for (const side of sides)
        expect(sayArea(area, side) ?? "").not.toMatch(/_|lumbo|thoracic|abdomen|undefined/);
  });

  it("carries the cautions of a suspected concussion, whatever the area", () => {
    const words = draft({ bodyArea: "ankle", suspectedConcussion: true });
    expect(words.doNow).toContain("No more sport today");
    expect(words.doNow).toContain("Do not leave Ines alone");
    for (const sign of [
      "passes out",
      "fit",
      "headache that gets worse",
      "sick again",
      "sleepy",
      "sees double",
      "weak arm or leg",
      "restless",
      "neck",
    ])
      expect(words.emergency).toContain(sign);
    expect(whole(draft({ bodyArea: "ankle", signs: ["seizure"] }))).toContain("concussion");
    expect(whole(draft())).not.toContain("concussion");
  });

  it("carries the cautions of a serious knee, the same day where four steps are impossible or it is locked", () => {
    expect(draft({ signs: ["pop"] }).doNow).toContain("as soon as you can");
    expect(draft({ signs: ["pop"] }).doNow).toContain("Do not let Ines put weight on the leg");
    for (const sign of ["locked", "cannot_bear_weight"] as const)
      expect(draft({ signs: [sign] }).doNow).toContain("A doctor should see Ines today");
    expect(draft().doNow).not.toContain("weight");
    const ankle = draft({ bodyArea: "ankle", signs: ["cannot_bear_weight"] }).doNow;
    expect(ankle).toBe("Do not let Ines put weight on the leg. A doctor should see Ines today.");
  });

  it("sends an emergency sign to the emergency services, and tells nobody to splint", () => {
    const words = draft({ bodyArea: "ankle", signs: ["deformity"] });
    expect(words.doNow).toContain("needs help from the emergency services now");
    expect(words.emergency).toContain("Do not move or splint");
  });

  it("never says that the athlete is fit, or how long it will take", () => {
    for (const sign of [[], ["pop"], ["seizure"]] as const)
      expect(whole(draft({ signs: sign }))).not.toMatch(/cleared|ready|fine|weeks|will heal|safe to/i);
  });

  it("reads at the age of 11 or below, whatever was recorded", () => {
    const worst: { grade: number; text: string }[] = [];
    const grade = (given: Partial<NoticeFacts>) => {
      // Points of a list have no full stop; each is graded as the sentence it is read as.
      const text = whole(draft({ firstCare, ...given })).replace(/^- (.*)$/gm, "$1.");
      worst.push({ grade: computeReadingGrade(text), text });
    };
    const seen = [
      [],
      ["pop", "swelling", "locked"],
      ["deformity", "numb"],
      ["seizure", "neck_pain"],
      signs,
    ] as const;
    for (const bodyArea of bodyAreas)
      for (const list of seen)
        for (const referredTo of [[], referrals]) grade({ bodyArea, signs: list, referredTo });
    for (const movement of movements)
      for (const contact of contacts) for (const onset of onsets) grade({ movement, contact, onset });
    worst.sort((a, b) => b.grade - a.grade);
    expect(worst[0]?.grade, worst[0]?.text).toBeLessThanOrEqual(mostGrade);
  });

  it("tells where it was", () => {
    const place = { outsideSport: false, kind: "match", team: "U16 Girls", venue: "Harbour Field" } as const;
    expect(sayWhere(place)).toBe("At the U16 Girls match, Harbour Field");
    expect(sayWhere({ ...place, kind: "training", venue: null })).toBe("At U16 Girls training");
    expect(sayWhere({ ...place, outsideSport: true })).toBe("Not at our training or a match");
    expect(sayWhere({ outsideSport: false, kind: null, team: null, venue: null })).toBeNull();
  });

  it("makes lists of lines with a dash", () => {
    expect(textBlocks("Call if Ines:\r\n- passes out\n- has a fit\n\nWait.")).toEqual([
      { kind: "paragraph", text: "Call if Ines:" },
      { kind: "list", items: ["passes out", "has a fit"] },
      { kind: "paragraph", text: "Wait." },
    ]);
  });
});
