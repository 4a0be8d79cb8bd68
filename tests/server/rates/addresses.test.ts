import { randomUUID } from "node:crypto";
import { beforeAll, describe, expect, it } from "vitest";
import { tableFileOf, tablesOf, viewNames } from "~/features/rates/csv-views.server";
import { planSchema } from "~/features/rates/programme/programme.schema";
import { recordPlan } from "~/features/rates/programme/programme-plans.server";
import { incidenceOf } from "~/features/rates/rates.server";
import { recordsBehind } from "~/features/rates/records/records.server";
import { loadRates } from "~/features/rates/view.server";
import { rateViews } from "~/features/rates/views";
import { write } from "~db/client.server";
import { makeClub } from "../../harness";
import { cookieOf, type Http, openServer } from "../../harness/http";
import { recordsOf } from "../access/records";
import { plantComparedClub } from "./compared-club";

/** What the addresses of the rates may hold: anything at all, and the keys of other people's teams. */

const plan = planSchema.parse({
  ...{ area: "knee", contact: "without", onset: "sudden", caseDefinition: "time-loss" },
  ...{ comparison: "warmed-up", words: "Sudden knee injuries, within session kind, teams as clusters." },
});

describe("an address with nonsense in it", () => {
  let http: Http;
  let slug: string;
  let cookies: string[];
  beforeAll(async () => {
    http = await openServer();
    const club = await makeClub();
    await recordsOf(club);
    await recordPlan(club.scopes.lead, plan);
    slug = club.organisation.slug;
    cookies = await Promise.all([cookieOf(club.people.lead), cookieOf(club.people.trainer)]);
  });

  const names = [
    ...[
      "season",
      "team",
      "injuries",
      "sessions",
      "by",
      "per",
      "sex",
      "sport",
      "age",
      "area",
      "side",
      "contact",
    ],
    ...["onset", "occurrence", "compare", "a", "b", "over", "plan", "group", "severity", "lost", "sort"],
  ];
  const values: Record<string, string> = {
    empty: "",
    quotes: "'\";--",
    nul: "a\u0000b",
    prototype: "__proto__",
    unicode: "\u{1f9d1}\u{1f3fd}‮\ufeffß",
    "half a character": "%ED%A0%80",
    long: "x".repeat(3000),
    infinity: "Infinity",
    nobody: randomUUID(),
  };
  const paths = [
    ...rateViews.map(({ path }) => path),
    ...["rates/records", "rates.csv", "rates/csv/teams/teams", "rates/csv/comparisons/sports"],
    "rates/csv/programme/warmed-up",
  ];

  // Each path meets every name, and over the paths every name meets every value.
  it.each(paths)("of %s is refused in words or read without it", async (path) => {
    const kinds = Object.entries(values);
    for (const [index, name] of names.entries()) {
      const [kind, value] = kinds[(index + paths.indexOf(path)) % kinds.length] as [string, string];
      const encoded = kind === "half a character" ? value : encodeURIComponent(value);
      const cookie = cookies[index % 2] ?? "";
      for (const search of [`${name}=${encoded}`, `${name}=${encoded}&${name}=${encoded}`]) {
        const { status, text } = await http.get(`/${slug}/${path}?${search}`).set("Cookie", cookie);
        expect([200, 400, 404], `${path} ${name} ${kind}`).toContain(status);
        if (status === 400) expect(text, `${path} ${name} ${kind}`).toMatch(/This address asks for/);
      }
    }
  });

  it("of the interface of programs is refused as a problem", async () => {
    for (const name of [...names, "__proto__", "constructor", ""])
      for (const [kind, value] of Object.entries(values)) {
        const encoded = kind === "half a character" ? value : encodeURIComponent(value);
        const { status, body } = await http
          .get(`/api/${slug}/incidence?${name}=${encoded}`)
          .set("Cookie", cookies[0] ?? "");
        expect([400, 404], `${name} ${kind}`).toContain(status);
        expect(body).toMatchObject({ status });
      }
  });
});

describe("a trainer of one team who writes the keys of another into the address", () => {
  let club: Awaited<ReturnType<typeof plantComparedClub>>;
  beforeAll(async () => {
    club = await plantComparedClub();
    await recordPlan(club.lead, plan);
  });

  it("meets neither its name nor its key in any view, file or list of records", async () => {
    const [own, ...others] = club.teams;
    const searches = [
      "?by=team",
      "?by=season&per=hours",
      "?sport=handball",
      `?compare=team&a=${own?.id}&b=${others[0]?.id}&over=all`,
      `?by=team&group=${others[0]?.id}`,
    ];
    for (const search of searches) {
      const url = new URL(`http://localhost/club/rates/x${search}`);
      const { data } = await loadRates(
        club.trainer,
        url,
        async (tx, view) => {
          const views = [];
          for (const name of viewNames) {
            const found = await tablesOf(tx, view, url, name);
            const table = found?.tables[0]?.id;
            if (table) views.push((await tableFileOf(tx, view, url, { view: name, table })).text);
            views.push(found);
          }
          return {
            views,
            records: await recordsBehind(tx, view, url),
            incidence: await incidenceOf(tx, view),
          };
        },
        (scope, run) => write(scope, run),
      );
      // The address itself comes back in links; what is asked for there is asked again.
      const sent = JSON.stringify(data).replaceAll(/"href":"[^"]*"/g, "");
      expect(sent).toContain(search.includes("handball") ? "hidden" : (own?.name ?? ""));
      for (const { id, name } of others) {
        expect(sent, `${search} ${name}`).not.toContain(name);
        expect(sent, `${search} ${name}`).not.toContain(id);
      }
      if (search.includes("group="))
        expect(data?.records).toMatchObject({ injuries: 0, sessions: 0, leftOut: [] });
    }
  });
});
