import type { Page } from "playwright-core";
import { afterEach, beforeAll, describe, expect, it } from "vitest";
import { foundOrganisation, inviteFirstPerson } from "~/features/accounts/founding.server";
import { masterKey } from "~/platform/crypto/keys.server";
import { maintenance } from "../../harness";
import { axe, expectNoFailures, openSite, type Site } from "../../harness/browser";
import { computeFromFiles, exactLimits } from "./independent";
import { accept, importFile, inviteFromPeople, linkInMail, logInjury, visit } from "./steps";

/** The whole main job as its people do it, on the files that clubs export. One story, told in order. */
const slug = "saltings-athletic";
const emails = {
  admin: "maud.fennel@example.org",
  lead: "ines.calder@example.org",
  secondLead: "osric.vane@example.org",
  trainer: "teodor.brask@example.org",
  coach: "juno.larch@example.org",
};
const team = "Girls U15 Soccer";
/** Days on which the team trained or played, by the file. */
const injuries = {
  knee: { number: "MB-1002", athlete: "Tova Gorsefield", day: "2026-09-21" },
  ankle: { number: "MB-1004", athlete: "Dagny Nguyễn", day: "2026-09-28" },
  thigh: { number: "MB-1018", athlete: "Pia Thornbury", day: "2026-10-31" },
};

let site: Site;
let admin: Page;
let lead: Page;
let trainer: Page;
let coach: Page;
let kneeId = "";

beforeAll(async () => {
  await maintenance().begin(async (sql) => {
    const id = await foundOrganisation(sql, masterKey(), {
      slug,
      name: "Saltings Athletic",
      kind: "club",
      timeZone: "Europe/London",
      phone: "+44 1632 960170",
    });
    await inviteFirstPerson(sql, id, { name: "Maud Fennel", email: emails.admin, roles: ["admin"] });
    await inviteFirstPerson(sql, id, { name: "Ines Calder", email: emails.lead, roles: ["lead"] });
  });
  site = await openSite();
});
afterEach(expectNoFailures);

describe.sequential("the main job", () => {
  it("lets the operator's first people accept, and the administrator set the season and invite", async () => {
    admin = await accept(site, emails.admin);
    lead = await accept(site, emails.lead);
    await visit(admin, `/${slug}/settings/seasons`);
    await admin.getByLabel("Name").fill("2026/27");
    await admin.getByLabel("First day").fill("1 8 2026");
    await admin.getByLabel("Last day").fill("30 6 2027");
    await admin.getByRole("button", { name: "Add the season" }).click();
    await admin.getByText("2026/27: 1 Aug 2026 to 30 Jun 2027").waitFor();
    await inviteFromPeople(admin, slug, {
      name: "Teodor Brask",
      email: emails.trainer,
      role: "Athletic trainer",
    });
    await inviteFromPeople(admin, slug, { name: "Juno Larch", email: emails.coach, role: "Coach" });
    await inviteFromPeople(admin, slug, {
      name: "Osric Vane",
      email: emails.secondLead,
      role: "Medical lead",
    });
    await axe(admin);
  });

  it("opens clinical records to nobody whom a lead has not confirmed", async () => {
    trainer = await accept(site, emails.trainer);
    await trainer.getByText("waits for a medical lead").waitFor();
    expect((await trainer.request.get(`/${slug}/injuries`)).status()).toBe(403);
    await visit(lead, `/${slug}/settings/people`);
    await lead.getByRole("button", { name: "Confirm athletic trainer" }).click();
    await lead.getByText("Confirmed: the role counts from now on.").waitFor();
    expect((await trainer.request.get(`/${slug}/injuries`)).status()).toBe(200);
    coach = await accept(site, emails.coach, { phone: true });
  });

  it("lets the athletic trainer import the roster and the exposure", async () => {
    await importFile(trainer, slug, "roster", "roster-plain.csv");
    await importFile(trainer, slug, "exposure", "exposure-by-athlete.csv");
    await visit(trainer, `/${slug}/roster`);
    await trainer.getByText("22 athletes on the teams today.").waitFor();
  });

  it("lets the athletic trainer log three injuries, with the caution and the safe default", async () => {
    kneeId = await logInjury(trainer, slug, {
      athlete: injuries.knee.athlete,
      day: "21 9 2026",
      time: "18:00",
      area: "Knee",
      side: "Right",
      movement: "Cutting",
      signs: ["Pop felt or heard", "Swelling already"],
    });
    await trainer.getByText("serious knee injury", { exact: false }).first().waitFor();
    await trainer.getByText("Unavailable", { exact: false }).first().waitFor();
    await logInjury(trainer, slug, {
      athlete: injuries.ankle.athlete,
      day: "28 9 2026",
      time: "18:00",
      area: "Ankle",
      side: "Left",
      movement: "Landing",
    });
    await logInjury(trainer, slug, {
      athlete: injuries.thigh.athlete,
      day: "31 10 2026",
      time: "10:20",
      area: "Thigh",
      side: "Left",
    });
    await visit(trainer, `/${slug}/injuries`);
    await expect
      .poll(() =>
        trainer
          .getByRole("row")
          .filter({ hasText: /knee|ankle|thigh/i })
          .count(),
      )
      .toBe(3);
    expect((await coach.request.get(`/${slug}/injuries`)).status()).toBe(403);
  });

  it("lets the coach add today's session and tick the warm-up, on a phone", async () => {
    await visit(coach, `/${slug}/sessions/new`);
    await coach.getByLabel("Team").selectOption({ label: team });
    await coach.getByRole("button", { name: "Add the session" }).click();
    await coach.waitForURL(/\/sessions\/[0-9a-f-]{36}$/);
    await axe(coach);
    await visit(coach, `${new URL(coach.url()).pathname}/warm-up`);
    for (const block of ["Running preparation", "Strength", "Jumping and landing"])
      await coach.locator("label", { hasText: new RegExp(`^\\W*${block}$`) }).click();
    await coach.getByText("All saved.").waitFor();
    await coach.reload();
    await coach.getByText("3/5").waitFor();
    expect(await coach.getByText("Tova Gorsefield").count()).toBe(1);
    // The coach sees that she may not play, and never why.
    expect(await coach.content()).not.toMatch(/knee|swelling/i);
    await axe(coach);
  });

  it("shows the lead rates that equal an independent computation of the same files", async () => {
    const truth = computeFromFiles(Object.values(injuries));
    const ask = async (query: string) => {
      const answer = await lead.request.get(`/api/${slug}/incidence?${query}`);
      expect(answer.status()).toBe(200);
      return (await answer.json()) as Incidence;
    };
    for (const per of ["aes", "hours"] as const) {
      const byAge = await ask(`by=age&per=${per}`);
      const byKind = await ask(`by=kind&per=${per}`);
      expectRate(byAge.total, truth.all, per);
      for (const [label, counted] of truth.byBand) expectRate(rowOf(byAge, label), counted, per);
      for (const [kind, counted] of truth.byKind) expectRate(rowOf(byKind, kind), counted, per);
    }
    await visit(lead, `/${slug}/rates`);
    await lead.getByText("3 injuries in 454 exposures").first().waitFor();
    const { lower, upper } = exactLimits(3);
    const per1000 = (value: number) => ((value / 454) * 1000).toFixed(1);
    await lead
      .getByText(`(${per1000(lower)} to ${per1000(upper)})`)
      .first()
      .waitFor();
    const csv = await (await lead.request.get(`/${slug}/rates.csv?by=kind`)).text();
    expect(csv).toContain("per 1000 athlete-exposures");
  });

  it("tells the guardian, who opens the link and acknowledges, and shows it to the athletic trainer", async () => {
    await visit(trainer, `/${slug}/injuries/${kneeId}/notice`);
    const call = trainer.getByRole("group", { name: "Whom did you phone?" });
    await call.locator("label").first().click();
    await trainer.locator("label", { hasText: /^Yes, we spoke$/ }).click();
    await trainer
      .getByLabel("What did you tell them?")
      .fill("Told her mother what happened and where to go.");
    await trainer.getByRole("button", { name: "Send now" }).click();
    await trainer.waitForURL(/\/notices\/[0-9a-f-]{36}/);
    await axe(trainer);

    const address = "guardian1002@example.org";
    const link = await linkInMail(site, address, /news|call/i);
    const [mail] = await site.mails(address);
    expect(`${mail?.subject} ${mail?.text} ${mail?.html}`).not.toMatch(
      /Tova|Gorsefield|knee|swelling|injur/i,
    );

    const guardian = await site.newPage({ phone: true });
    await visit(guardian, link);
    await guardian.getByLabel("When was the athlete born?").fill("9 9 2013");
    await guardian.getByRole("button", { name: "Open the news" }).click();
    await guardian.getByRole("heading", { name: "News about Tova" }).waitFor();
    await axe(guardian);
    await guardian.getByRole("button", { name: "I have read this" }).click();
    await guardian.getByText("You have told us that you have read this.").waitFor();
    await axe(guardian);

    await trainer.reload();
    await trainer
      .getByText(/acknowledged/i)
      .first()
      .waitFor();
    await visit(trainer, `/${slug}/notices`);
    await visit(trainer, `/${slug}/today`);
    await visit(lead, `/${slug}/today`);
    await visit(admin, `/${slug}/rates`);
    await visit(coach, `/${slug}/warm-ups`);
  });
});

type Row = { label: string; injuries: number; exposureInRate: number | null; rate: Rate | null };
type Rate = { estimate: number; lower: number; upper: number };
type Incidence = { groups: Row[]; total: Row };
type Counted = { aes: number; hours: number; injuries: number };

function rowOf({ groups }: Incidence, label: string) {
  const words = label.replace("-", " to ");
  const row = groups.find((group) => [label, words].some((text) => group.label.toLowerCase().includes(text)));
  if (!row) throw new Error(`No row ${label} among ${groups.map((group) => group.label).join(", ")}`);
  return row;
}

function expectRate(row: Row, counted: Counted, per: "aes" | "hours") {
  const exposure = counted[per];
  const limits = exactLimits(counted.injuries);
  expect(row.injuries).toBe(counted.injuries);
  expect(row.exposureInRate).toBeCloseTo(exposure, 6);
  expect(row.rate?.estimate).toBeCloseTo((counted.injuries / exposure) * 1000, 6);
  expect(row.rate?.lower).toBeCloseTo((limits.lower / exposure) * 1000, 6);
  expect(row.rate?.upper).toBeCloseTo((limits.upper / exposure) * 1000, 6);
}
