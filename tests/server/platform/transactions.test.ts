import { randomUUID } from "node:crypto";
import { eq, sql } from "drizzle-orm";
import { beforeAll, describe, expect, it, vi } from "vitest";
import { once } from "~/platform/operations.server";
import { assertApplicationRole, rawClient, read, type Tx, write } from "~db/client.server";
import { venues } from "~db/schema";
import { maintenance, makeClub } from "../../harness";
import { cookieOf, type Http, openServer } from "../../harness/http";

let club: Awaited<ReturnType<typeof makeClub>>;
beforeAll(async () => {
  club = await makeClub();
});

const addVenue = (tx: Tx, name: string) =>
  tx.insert(venues).values({ organisationId: tx.scope.organisationId, id: randomUUID(), name });
const countVenues = async (name: string) => {
  const [row] = await maintenance()<
    { count: number }[]
  >`select count(*)::int from venues where name = ${name}`;
  return row?.count;
};

describe("a transaction", () => {
  it("leaves nothing of a write that throws", async () => {
    const attempt = write(club.scopes.admin, async (tx) => {
      await addVenue(tx, "Half a write");
      throw new Error("Stopped midway.");
    });
    await expect(attempt).rejects.toThrow("Stopped midway.");
    expect(await countVenues("Half a write")).toBe(0);
  });

  it("refuses a query after its end, whether it ended well or badly", async () => {
    let kept: Tx | undefined;
    await read(club.scopes.admin, async (tx) => {
      kept = tx;
    });
    expect(() => kept?.select().from(venues)).toThrow("This transaction is closed");
    await write(club.scopes.admin, async (tx) => {
      kept = tx;
      throw new Error("Stopped.");
    }).catch(() => {});
    expect(() => kept?.execute(sql`select 1`)).toThrow("This transaction is closed");
  });

  it("only reads where it was opened for reading", async () => {
    await expect(read(club.scopes.admin, (tx) => addVenue(tx, "Read only"))).rejects.toMatchObject({
      cause: { code: "25006" },
    });
  });

  it("leaves nothing of its scope to the next user of the connection", async () => {
    const setting = sql<{ org: string; person: string; actors: string }>`select
      current_setting('app.organisation_id', true) as org, current_setting('app.person_id', true) as person,
      current_setting('app.actors', true) as actors`;
    await read(club.scopes.lead, (tx) => tx.execute(setting));
    const rows = await Promise.all(
      Array.from(
        { length: 20 },
        () => rawClient()`select current_setting('app.organisation_id', true) as org,
        current_setting('app.actors', true) as actors, (select count(*)::int from athletes) as athletes`,
      ),
    );
    for (const [row] of rows) expect([row?.org || "", row?.actors || "", row?.athletes]).toEqual(["", "", 0]);
  });

  it("keeps scopes apart that run at the same time", async () => {
    const other = await makeClub();
    const both = [club, other];
    await Promise.all(
      Array.from({ length: 60 }, async (_, index) => {
        const mine = both[index % 2] ?? club;
        const rows = await read(mine.scopes.lead, (tx) =>
          tx.execute<{ organisation_id: string }>(sql`select organisation_id from athletes, pg_sleep(0.005)`),
        );
        expect(new Set(rows.map((row) => row.organisation_id))).toEqual(new Set([mine.organisation.id]));
      }),
    );
  });
});

describe("a write under a client-made id", () => {
  const add = (id: string, name: string, scope = club.scopes.admin) =>
    write(scope, (tx) =>
      once(tx, id, { name }, async () => {
        await addVenue(tx, name);
        return { name, made: randomUUID() };
      }),
    );

  it("runs once, and a replay gets the first result", async () => {
    const id = randomUUID();
    const first = await add(id, "Once");
    expect(await add(id, "Once")).toEqual(first);
    expect(await countVenues("Once")).toBe(1);
  });

  it("does not mind the order of the answers", async () => {
    const id = randomUUID();
    const run = (body: Record<string, unknown>) =>
      write(club.scopes.coach, (tx) => once(tx, id, body, async () => ({ made: randomUUID() })));
    expect(await run({ b: [2, { d: 1, c: 2 }], a: 1 })).toEqual(await run({ a: 1, b: [2, { c: 2, d: 1 }] }));
    await expect(run({ a: 1, b: [{ c: 2, d: 1 }, 2] })).rejects.toMatchObject({
      code: "operation_mismatch",
      status: 422,
    });
  });

  it("refuses another body, and another person, and changes nothing", async () => {
    const id = randomUUID();
    await add(id, "First body");
    await expect(add(id, "Second body")).rejects.toMatchObject({ code: "operation_mismatch" });
    await expect(add(id, "First body", club.scopes.trainer)).rejects.toMatchObject({
      code: "operation_mismatch",
    });
    expect(await countVenues("Second body")).toBe(0);
    expect(await countVenues("First body")).toBe(1);
  });

  it("runs once when many replays come at the same moment", async () => {
    const id = randomUUID();
    const results = await Promise.all(Array.from({ length: 6 }, () => add(id, "At once")));
    expect(new Set(results.map(({ made }) => made)).size).toBe(1);
    expect(await countVenues("At once")).toBe(1);
  });

  it("may be tried again after a failure, which kept nothing", async () => {
    const id = randomUUID();
    const failing = write(club.scopes.admin, (tx) =>
      once(tx, id, { name: "Later" }, async () => {
        await addVenue(tx, "Later");
        throw new Error("Not this time.");
      }),
    );
    await expect(failing).rejects.toThrow("Not this time.");
    await add(id, "Later");
    expect(await countVenues("Later")).toBe(1);
  });

  it("means something else in another organisation", async () => {
    const other = await makeClub();
    const id = randomUUID();
    await add(id, "Ours");
    expect(await add(id, "Theirs", other.scopes.admin)).toMatchObject({ name: "Theirs" });
  });
});

describe("a server whose connections are all taken", () => {
  let http: Http;
  beforeAll(async () => {
    // Read by the built server when it is loaded; the modules of this file have their own pool already.
    Object.assign(process.env, { DATABASE_POOL: "1", DATABASE_WAIT_SECONDS: "0.3" });
    http = await openServer();
  });

  it("answers 503 in plain words, and serves again when one is free", async () => {
    const cookie = await cookieOf(club.people.admin);
    const page = `/${club.organisation.slug}/settings`;
    const api = `/api/${club.organisation.slug}/athletes?q=ines`;
    expect((await http.get(page).set("Cookie", cookie)).status).toBe(200);

    // One of them holds the one connection and waits for the lock; the others find none.
    const lock = await maintenance().reserve();
    await lock`begin`;
    await lock`lock table memberships in access exclusive mode`;
    let answered = 0;
    const asked = [page, api, page, api, page, api].map(async (path) => {
      const answer = await http.get(path).set("Cookie", cookie);
      answered += 1;
      return answer;
    });
    try {
      await expect.poll(() => answered, { timeout: 40_000 }).toBeGreaterThanOrEqual(5);
    } finally {
      await lock`rollback`;
      lock.release();
    }
    const answers = await Promise.all(asked);
    const busy = answers.filter(({ status }) => status === 503);
    expect(busy.length).toBeGreaterThanOrEqual(5);
    for (const { type, text, body } of busy) {
      expect(text).toMatch(/Too many people are using Haleside|being changed by somebody else/);
      expect(type).toBe(body.status === 503 ? "application/problem+json" : "text/html");
    }
    expect(busy.some(({ text }) => text.includes("Too many people are using Haleside at this moment"))).toBe(
      true,
    );
    expect((await http.get(page).set("Cookie", cookie)).status).toBe(200);
  });
});

it("refuses to start as a role that owns or bypasses", async () => {
  await expect(assertApplicationRole()).resolves.toBeUndefined();
  for (const door of ["DATABASE_OWNER_URL", "DATABASE_MAINTENANCE_URL"]) {
    vi.resetModules();
    vi.stubEnv("DATABASE_URL", process.env[door]);
    const fresh = await import("~db/client.server");
    await expect(fresh.assertApplicationRole()).rejects.toThrow("owns nothing and cannot bypass");
    await fresh.closeDatabase();
    vi.unstubAllEnvs();
  }
});

it("finds its own rows by an id, as a check of the tests above", async () => {
  await write(club.scopes.admin, (tx) => addVenue(tx, "Control"));
  const rows = await read(club.scopes.coach, (tx) =>
    tx.select().from(venues).where(eq(venues.name, "Control")),
  );
  expect(rows).toHaveLength(1);
});
