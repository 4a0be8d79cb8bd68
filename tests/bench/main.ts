/**
 * `npm run bench`: how the rates of one club fare among many, as ratios within this run against the bars of the
 * project. Builds clubs with five million participations, as many as 200 of one size have, one of them ten times as large, in a database of its own in the test cluster and removes
 * it at the end. Takes some minutes. Ends with 1 only where roll-ups and records disagree: a ratio is read, not tested.
 *
 *   BENCH_CLUBS=20,200 BENCH_REPEATS=21 npm run bench
 */

import type { Tx } from "~db/client.server";
import { scopeOf } from "../harness/scopes";
import { addClubs, rollUpOthers } from "./build";
import { openBench } from "./database";
import { type Line, printTable, type Time, timeInTurns } from "./measure";
import type { Season } from "./work";

const [few = 20, many = 200] = (process.env.BENCH_CLUBS ?? "20,200").split(",").map(Number);
const repeats = Number(process.env.BENCH_REPEATS ?? 21);

const bench = await openBench();
const { connect, countParticipations, dashboard, live, rolled } = await import("./work");
const { rollUp } = await import("~/features/rates/rollups/rollups.server");
const { closeDatabase } = await import("~db/client.server");

async function step<T>(name: string, run: () => Promise<T>): Promise<T> {
  const start = performance.now();
  const result = await run();
  console.log(`${name}: ${((performance.now() - start) / 1000).toFixed(1)} s`);
  return result;
}

async function settle() {
  await bench.superuser`vacuum analyze`;
  await bench.superuser`checkpoint`;
}

const placeOf = (id: string) => ({ id, slug: "club", timeZone: "Europe/London" });

async function markAndRollUp(club: string) {
  await bench.superuser`insert into rollup_marks (organisation_id, cause, team_id, from_day)
    select distinct organisation_id, 'session', team_id, day from sessions where organisation_id = ${club}`;
  await bench.superuser`insert into rollup_marks (organisation_id, cause, injury_id)
    select organisation_id, 'injury', id from injuries where organisation_id = ${club}`;
  await settle();
  if (!(await rollUp(scopeOf(placeOf(club), ["job"])))) throw new Error("The club was not rolled up.");
}

const listSeasons = (club: string) => bench.superuser<Season[]>`
  select id, name, starts_on::text as "startsOn", ends_on::text as "endsOn" from seasons
  where organisation_id = ${club} order by starts_on`;

for (const signal of ["SIGINT", "SIGTERM"] as const)
  process.once(signal, () => void bench.close().finally(() => process.exit(1)));

try {
  const [club = "", ...others] = await step(`${few} clubs`, () => addClubs(bench.superuser, few));
  const [large = ""] = await step("a club ten times as large", () => addClubs(bench.superuser, 1, 80));
  await step("rolling up", async () => {
    for (const each of [club, large]) await markAndRollUp(each);
    await rollUpOthers(bench.superuser);
    await settle();
  });

  const scope = scopeOf(placeOf(club), ["lead"]);
  const [app, free, largeApp] = [
    await connect(process.env.DATABASE_URL ?? "", scope),
    await connect(process.env.DATABASE_MAINTENANCE_URL ?? "", scope),
    await connect(process.env.DATABASE_URL ?? "", scopeOf(placeOf(large), ["lead"])),
  ];
  const [seasons, largeSeasons] = [await listSeasons(club), await listSeasons(large)];
  const all = { from: seasons[0]?.startsOn ?? "", to: scope.today, teamIds: null };

  const as = ({ tx, pid }: typeof app, run: (tx: Tx) => Promise<unknown>) => ({ run: () => run(tx), pid });
  const timePages = () =>
    timeInTurns(
      {
        count: as(app, countParticipations),
        season: as(app, (tx) => dashboard(tx, seasons.slice(-1))),
        all: as(app, (tx) => dashboard(tx, seasons)),
        largeCount: as(largeApp, countParticipations),
        largeSeason: as(largeApp, (tx) => dashboard(tx, largeSeasons.slice(-1))),
      },
      repeats,
    );
  const amongFew = await step(`timing among ${few}`, timePages);

  await step(`${many} clubs`, () => addClubs(bench.superuser, many - 11 - others.length));
  await step("rolling up the others", async () => {
    await rollUpOthers(bench.superuser);
    await settle();
  });
  const amongMany = await step(`timing among ${many}`, timePages);
  const rest = await step("timing roll-ups and row-level security", () =>
    timeInTurns(
      {
        rolled: as(app, (tx) => rolled(tx, all)),
        live: as(app, (tx) => live(tx, all)),
        pageApp: as(app, (tx) => dashboard(tx, seasons.slice(-1))),
        pageFree: as(free, (tx) => dashboard(tx, seasons.slice(-1))),
        liveApp: as(app, (tx) => live(tx, all)),
        liveFree: as(free, (tx) => live(tx, all)),
      },
      repeats,
    ),
  );

  const [total] = await bench.superuser<{ all: number; own: number }[]>`
    select count(*)::int as all, (count(*) filter (where organisation_id = ${club}))::int as own from participations`;
  console.log(
    `\n${total?.own} participations of ${total?.all} belong to the club that is measured; medians of ${repeats}\n`,
  );
  const line = (what: string, time: Time, against: string, base: Time) => ({ what, time, against, base });
  const count = "count over an index";
  const lines: Line[] = [
    { ...line(`a season, among ${many}`, amongMany.season, count, amongMany.count), atMost: 5 },
    { ...line(`all seasons, among ${many}`, amongMany.all, count, amongMany.count), atMost: 5 },
    {
      ...line("a season, ten times as large", amongMany.largeSeason, count, amongMany.largeCount),
      atMost: 5,
    },
    { ...line(`a season, among ${many}`, amongMany.season, `among ${few}`, amongFew.season), atMost: 1.25 },
    { ...line(`all seasons, among ${many}`, amongMany.all, `among ${few}`, amongFew.all), atMost: 1.25 },
    { ...line("all time, from roll-ups", rest.rolled, "from records", rest.live), atLeast: 20 },
    { ...line("page under row-level security", rest.pageApp, "without it", rest.pageFree), atMost: 1.1 },
    { ...line("records under row-level security", rest.liveApp, "without it", rest.liveFree), atMost: 1.1 },
  ];
  printTable(lines);

  const { expectEqual } = await import("./equality");
  expectEqual(await rolled(app.tx, all), await live(app.tx, all));
  console.log("\nRoll-ups and records agree.");
  if (process.env.BENCH_KEEP) {
    console.log(`kept: ${process.env.DATABASE_URL}`);
    await new Promise(() => setInterval(() => {}, 1000));
  }
  await app.close();
  await free.close();
  await largeApp.close();
} finally {
  await closeDatabase();
  await bench.close();
}
