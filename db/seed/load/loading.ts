import { getTableColumns, sql } from "drizzle-orm";
import type { PgTable } from "drizzle-orm/pg-core";
import { instantOf } from "~/platform/clock";
import { type Sealer, sealer } from "~/platform/crypto/keys.server";
import type { Tx } from "~db/client.server";
import type { Scenario } from "../scenario/types";
import { demoId } from "./ids";

/** The rows of one organisation, by the names that they have in the scenario. */
type OwnRows = {
  [Name in keyof Scenario as Scenario[Name] extends readonly { organisation: string }[]
    ? Name
    : never]: Scenario[Name];
};
export type OwnScenario = OwnRows & {
  organisation: Scenario["organisations"][number];
  people: Scenario["people"];
  today: string;
};

export function scenarioOf(scenario: Scenario, slug: string): OwnScenario {
  const organisation = scenario.organisations.find(({ key }) => key === slug);
  if (!organisation) throw new RangeError(`The scenario has no organisation "${slug}".`);
  const own = <Row extends { organisation: string }>(rows: readonly Row[]) =>
    rows.filter((row) => row.organisation === slug);
  return {
    organisation,
    people: scenario.people,
    today: scenario.today,
    memberships: own(scenario.memberships),
    seasons: own(scenario.seasons),
    teams: own(scenario.teams),
    venues: own(scenario.venues),
    athletes: own(scenario.athletes),
    guardians: own(scenario.guardians),
    guardianships: own(scenario.guardianships),
    roster: own(scenario.roster),
    sessions: own(scenario.sessions),
    participations: own(scenario.participations),
    warmUps: own(scenario.warmUps),
    injuries: own(scenario.injuries),
    availability: own(scenario.availability),
    coachReports: own(scenario.coachReports),
    encounters: own(scenario.encounters),
    notices: own(scenario.notices),
    confirmedWeeks: own(scenario.confirmedWeeks),
  };
}

/** What every part of the load needs: the open transaction and how keys become ids and moments instants. */
export type Loading = {
  tx: Tx;
  own: OwnScenario;
  organisationId: string;
  seals: Sealer;
  id: (kind: string, key: string) => string;
  /** The id of a person by their key in the scenario. */
  person: (key: string) => string;
  /** The instant of a local moment; one that has not come yet on the load's day becomes the present one. */
  at: (moment: string) => Date;
  /** The instant at a local time of a day, never later than now. */
  on: (day: string, time: string) => Date;
};

export async function openLoading(
  tx: Tx,
  own: OwnScenario,
  people: ReadonlyMap<string, string>,
): Promise<Loading> {
  const { organisationId, timeZone } = tx.scope;
  const now = new Date();
  // Each athlete's part of a session has the session's moment, and each row names its athlete: most are asked for often.
  const at = remember((moment: string) => {
    const instant = instantOf(timeZone, moment.slice(0, 10), moment.slice(11));
    return instant < now ? instant : now;
  });
  const ids = remember((kind: string) => remember((key: string) => demoId(own.organisation.key, kind, key)));
  return {
    tx,
    own,
    organisationId,
    seals: await sealer(tx),
    id: (kind, key) => ids(kind)(key),
    person: (key) => find(people, key),
    at,
    on: (day, time) => at(`${day}T${time}`),
  };
}

function remember<Value>(make: (key: string) => Value): (key: string) => Value {
  const known = new Map<string, Value>();
  return (key) => {
    const value = known.get(key) ?? make(key);
    known.set(key, value);
    return value;
  };
}

export function find<Value>(map: ReadonlyMap<string, Value>, key: string): Value {
  const value = map.get(key);
  if (value === undefined) throw new RangeError(`The scenario has no "${key}".`);
  return value;
}

export const byKey = <Row extends { key: string }>(rows: readonly Row[]) =>
  new Map(rows.map((row) => [row.key, row]));

export function groupBy<Row>(rows: readonly Row[], keyOf: (row: Row) => string): Map<string, Row[]> {
  const groups = new Map<string, Row[]>();
  for (const row of rows) {
    const group = groups.get(keyOf(row));
    if (group) group.push(row);
    else groups.set(keyOf(row), [row]);
  }
  return groups;
}

/** Bytes as PostgreSQL writes them; the rest as JSON has it. */
const forJson = (value: unknown) =>
  value instanceof Uint8Array ? `\\x${Buffer.from(value).toString("hex")}` : (value ?? null);

/** How many rows one statement takes: a few megabytes of text at most. */
const chunkSize = 5000;

/**
 * Inserts rows that all name the same columns, many with one parameter: a list of values would cost more to build, send
 * and parse than to store.
 */
export async function insertRows<Table extends PgTable>(
  tx: Tx,
  table: Table,
  rows: readonly Table["$inferInsert"][],
) {
  const [first] = rows;
  if (!first) return;
  const columns = Object.entries(getTableColumns(table)).filter(([key]) => key in first);
  const names = sql.join(
    columns.map(([, { name }]) => sql.identifier(name)),
    sql`, `,
  );
  for (let from = 0; from < rows.length; from += chunkSize) {
    const chunk = rows.slice(from, from + chunkSize).map((row) => {
      const values = new Map(Object.entries(row));
      return Object.fromEntries(columns.map(([key, { name }]) => [name, forJson(values.get(key))]));
    });
    await tx.execute(sql`insert into ${table} (${names})
      select ${names} from jsonb_populate_recordset(null::${table}, ${JSON.stringify(chunk)}::text::jsonb)`);
  }
}
