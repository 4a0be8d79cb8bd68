import type postgres from "postgres";
import { MARRAM_BAY, OTTERWICK } from "../scenario/plan";
import { demoId } from "./ids";

const slugs = [MARRAM_BAY, OTTERWICK];

/** The id under which the demo founds an organisation; another id under the same address is somebody's own. */
export const demoOrganisationId = (slug: string) => demoId(slug, "organisation", slug);

/** The demo's organisations that are not loaded yet, and whether each is founded already. Needs the maintenance role. */
export async function listMissing(client: postgres.Sql) {
  const rows = await client<{ slug: string; id: string; loaded: boolean }[]>`
    select o.slug, o.organisation_id as id,
      exists (select 1 from athletes a where a.organisation_id = o.organisation_id) as loaded
    from organisations o where o.slug in ${client(slugs)}`;
  return slugs.flatMap((slug) => {
    const known = rows.find((row) => row.slug === slug);
    const isForeign = known !== undefined && known.id !== demoOrganisationId(slug);
    return known?.loaded || isForeign ? [] : [{ slug, founded: known !== undefined }];
  });
}
