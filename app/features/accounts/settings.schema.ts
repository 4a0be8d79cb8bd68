import { z } from "zod";
import { isTimeZone } from "~/platform/clock";
import { typedDay } from "~/platform/form-fields";
import { sports, surfaces, teamSexes } from "~db/schema/codes";

const whole = (min: number, max: number) =>
  z.coerce
    .number("Enter a whole number.")
    .int("Enter a whole number.")
    .min(min, `Enter ${min} or more.`)
    .max(max, `Enter ${max} or less.`);

export const seasonSchema = z
  .object({
    name: z.string().trim().min(1, "Enter a name, such as 2026/27.").max(40, "Use at most 40 characters."),
    startsOn: typedDay(),
    endsOn: typedDay(),
  })
  .refine(({ startsOn, endsOn }) => endsOn > startsOn, {
    path: ["endsOn"],
    message: "The season ends before it starts.",
  });

export const teamSchema = z.object({
  name: z.string().trim().min(1, "Enter the team's name.").max(80, "Use at most 80 characters."),
  sport: z.enum(sports, "Choose the sport."),
  sex: z.enum(teamSexes, "Choose one."),
  underAge: z.preprocess(
    (text) => (text === "" || text === undefined ? null : text),
    z.nullable(whole(5, 40)),
  ),
});

export const venueSchema = z.object({
  name: z.string().trim().min(1, "Enter the venue's name.").max(80, "Use at most 80 characters."),
  address: z.string().trim().max(300).default(""),
  access: z.string().trim().max(500).default(""),
  defibrillator: z.string().trim().max(300).default(""),
  emergencyNumbers: z.string().trim().max(300).default(""),
  surface: z
    .union([z.enum(surfaces), z.literal("")])
    .optional()
    .transform((value) => value || null),
});

/** One age band a line: "13-14", "under 10", "over 25". Together they cover every age once. */
const bands = z.string().transform((text, context) => {
  const lines = text
    .split("\n")
    .map((line) => line.trim())
    .filter(Boolean);
  const parsed = lines.map((label) => {
    const range = /^(\d{1,2})\s*(?:-|–|to)\s*(\d{1,2})$/.exec(label);
    const under = /^under\s+(\d{1,2})$/i.exec(label);
    const over = /^over\s+(\d{1,2})$/i.exec(label);
    if (range) return { label, from: Number(range[1]), to: Number(range[2]) };
    if (under) return { label, from: 0, to: Number(under[1]) - 1 };
    if (over) return { label, from: Number(over[1]) + 1, to: null };
    return null;
  });
  const refuse = (message: string) => {
    context.addIssue({ code: "custom", message });
    return z.NEVER;
  };
  const wrong = lines.find((_, index) => parsed[index] === null);
  if (wrong) return refuse(`“${wrong}” is not an age band. Write 13-14, under 10 or over 25.`);
  const reversed = parsed.find((band) => band && band.to !== null && band.to < band.from);
  if (reversed) return refuse(`“${reversed.label}” ends before it begins. Write the younger age first.`);
  const sorted = parsed.flatMap((band) => band ?? []).sort((a, b) => a.from - b.from);
  if (sorted[0]?.from !== 0)
    return refuse("The first band must begin with under …, so that nobody is left out.");
  if (sorted.at(-1)?.to !== null) return refuse("The last band must be over …, so that nobody is left out.");
  for (const [index, band] of sorted.entries()) {
    const next = sorted[index + 1];
    if (next && (band.to === null || next.from !== band.to + 1))
      return refuse(`“${band.label}” and “${next.label}” overlap or leave an age out.`);
  }
  return sorted;
});

export const organisationSchema = z.object({
  name: z.string().trim().min(1, "Enter the name.").max(120),
  timeZone: z
    .string()
    .trim()
    .refine(isTimeZone, "This is not a time zone. Write a name such as Europe/London."),
  phone: z.string().trim().min(1, "Enter the number that guardians call.").max(40),
  phoneHours: z
    .string()
    .trim()
    .max(120)
    .optional()
    .transform((text) => text || null),
  ageBands: bands,
  ownDecisionAge: whole(12, 25),
  smallNumber: whole(3, 20),
  retentionYears: whole(1, 30),
  noticeLinkDays: whole(1, 60),
});
