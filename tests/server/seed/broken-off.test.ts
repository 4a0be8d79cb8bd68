import { expect, it } from "vitest";
import { loadDemo } from "~db/seed/load";
import { buildScenario } from "~db/seed/scenario";
import { MARRAM_BAY, OTTERWICK } from "~db/seed/scenario/plan";
import { maintenance, makeClub, owner } from "../../harness";

const today = "2026-12-01";
const load = () => loadDemo({ maintenanceUrl: process.env.DATABASE_MAINTENANCE_URL ?? "", today });

async function countIn(slug: string) {
  const [row] = await maintenance()<
    { seasons: number; athletes: number; sessions: number; notices: number }[]
  >`
    select (select count(*)::int from seasons s where s.organisation_id = o.organisation_id) as seasons,
      (select count(*)::int from athletes a where a.organisation_id = o.organisation_id) as athletes,
      (select count(*)::int from sessions s where s.organisation_id = o.organisation_id) as sessions,
      (select count(*)::int from notices n where n.organisation_id = o.organisation_id) as notices
    from organisations o where o.slug = ${slug}`;
  return row;
}

it("loads the records whole or not at all, goes on where it stopped, and touches nobody's own organisation", async () => {
  const club = await makeClub({ slug: OTTERWICK, name: "Somebody's own" });
  const ownBefore = await countIn(OTTERWICK);
  await owner().unsafe(`
    create function break_off() returns trigger language plpgsql as $$ begin raise 'broken off'; end $$;
    create trigger break_off before insert on notices execute function break_off()`);
  await expect(load()).rejects.toThrow();
  const half = await countIn(MARRAM_BAY);
  expect(half).toMatchObject({ seasons: 3, athletes: 0, sessions: 0, notices: 0 });

  await owner().unsafe("drop trigger break_off on notices");
  expect(await load()).toEqual([MARRAM_BAY]);
  const scenario = buildScenario({ today });
  const of = (rows: readonly { organisation: string }[]) =>
    rows.filter(({ organisation }) => organisation === MARRAM_BAY).length;
  expect(await countIn(MARRAM_BAY)).toEqual({
    seasons: of(scenario.seasons),
    athletes: of(scenario.athletes),
    sessions: of(scenario.sessions),
    notices: of(scenario.notices),
  });
  expect(await load()).toEqual([]);
  expect(await countIn(OTTERWICK)).toEqual(ownBefore);
  expect(club.organisation.slug).toBe(OTTERWICK);
});
