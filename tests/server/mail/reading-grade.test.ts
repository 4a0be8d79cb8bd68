import { describe, expect, it } from "vitest";
import { mailColours } from "~/platform/mail/mail-colours";
import { computeReadingGrade, countSyllables, splitSentences } from "./reading-grade";

describe("the Flesch-Kincaid grade", () => {
  it("is the formula of 1975, by hand: 6 words, 1 sentence, 6 syllables", () => {
    expect(computeReadingGrade("The cat sat on the mat.")).toBeCloseTo(0.39 * 6 + 11.8 - 15.59, 10);
  });

  it("is the formula of 1975, by hand: 8 words, 2 sentences, 11 syllables", () => {
    const text = "The happy rabbit ran. It hid under grass.";
    expect(computeReadingGrade(text)).toBeCloseTo(0.39 * (8 / 2) + 11.8 * (11 / 8) - 15.59, 10);
  });

  it("counts syllables, never too few", () => {
    const known = {
      call: 1,
      please: 1,
      urgent: 2,
      athlete: 2,
      health: 1,
      organisation: 5,
      number: 2,
      people: 2,
      "e-mail": 2,
    };
    for (const [word, syllables] of Object.entries(known)) {
      expect(countSyllables(word), word).toBeGreaterThanOrEqual(syllables);
      expect(countSyllables(word), word).toBeLessThanOrEqual(syllables + 1);
    }
  });

  it("leaves out headings, buttons, addresses and numbers on their own", () => {
    expect(
      splitSentences("Please call us\n\nIt is urgent.\nhttps://example.org/a.b?c\n01632 960 123"),
    ).toEqual(["It is urgent."]);
  });

  it("grades hard words well above what a mail may be", () => {
    const text =
      "The multidisciplinary rehabilitation programme necessitates comprehensive physiological evaluation.";
    expect(computeReadingGrade(text)).toBeGreaterThan(12);
  });
});

/** Contrast ratio of two sRGB colours, WCAG 2.2 definition of relative luminance. */
function computeContrast(one: string, other: string) {
  const [high = 0, low = 0] = [one, other].map(readLuminance).sort((a, b) => b - a);
  return (high + 0.05) / (low + 0.05);
}

function readLuminance(hex: string) {
  const [red = 0, green = 0, blue = 0] = [1, 3, 5].map((at) => {
    const value = Number.parseInt(hex.slice(at, at + 2), 16) / 255;
    return value <= 0.04045 ? value / 12.92 : ((value + 0.055) / 1.055) ** 2.4;
  });
  return 0.2126 * red + 0.7152 * green + 0.0722 * blue;
}

describe("the colours of mails", () => {
  it("computes the contrast of black and white as 21", () => {
    expect(computeContrast("#000000", "#ffffff")).toBeCloseTo(21, 5);
  });

  it.each(["light", "dark"] as const)("are at 4.5:1 or more in %s", (scheme) => {
    const { page, paper, text, soft, primary, onPrimary, serious } = mailColours[scheme];
    for (const ground of [page, paper]) {
      for (const colour of [text, soft, primary, serious]) {
        expect(computeContrast(colour, ground), `${colour} on ${ground}`).toBeGreaterThanOrEqual(4.5);
      }
    }
    expect(computeContrast(onPrimary, primary)).toBeGreaterThanOrEqual(4.5);
    expect(computeContrast(mailColours.head.text, mailColours.head.ground)).toBeGreaterThanOrEqual(4.5);
  });
});
