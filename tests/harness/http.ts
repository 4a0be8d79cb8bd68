import type { AddressInfo } from "node:net";
import { join } from "node:path";
import { pathToFileURL } from "node:url";
import type { Express } from "express";
import supertest from "supertest";
import { signIn } from "~/features/accounts/sign-in.server";
import { ROOT } from "../../app/platform/machine/places.mjs";
import { ensureTestBuild } from "./build";
import { atEnd } from "./closing";
import type { TestPerson } from "./people";

/**
 * The built server, spoken to over HTTP.
 *
 *   const http = await openServer();
 *   const cookie = await cookieOf(club.people.coach);
 *   await http.get(`/${club.organisation.slug}/injuries`).set("Cookie", cookie).expect(403);
 *   await post(http, "/sign-in", { email, password }).expect(302);
 */

type Built = { app: Express; end: () => Promise<void> };
export type Http = ReturnType<typeof supertest>;

let opened: Promise<Http> | undefined;

/** Loads the built application in this process and listens on a port of its own, without workers. */
export function openServer(): Promise<Http> {
  opened ??= open();
  return opened;
}

async function open() {
  await ensureTestBuild();
  const built = (await import(
    /* @vite-ignore */ pathToFileURL(join(ROOT, "build/server/index.js")).href
  )) as Built;
  const server = built.app.listen(0, "127.0.0.1");
  await new Promise((resolve, reject) => {
    server.once("listening", resolve);
    server.once("error", reject);
  });
  atEnd(async () => {
    server.closeAllConnections();
    await new Promise((resolve) => server.close(resolve));
    await built.end();
  });
  return supertest(`http://127.0.0.1:${(server.address() as AddressInfo).port}`);
}

let address = 0;

/** Signs a person in; what a browser would send back from then on. */
export async function cookieOf(person: TestPerson): Promise<string> {
  address += 1;
  const request = new Request(process.env.APP_ORIGIN ?? "", { headers: { "user-agent": "tests" } });
  const headers = await signIn({ request, clientAddress: `198.51.100.${address % 250}` }, person);
  return cookiesOf(headers.getSetCookie());
}

/** The name and value of cookies, as they are sent back. */
export const cookiesOf = (set: readonly string[]) => set.map((line) => line.split(";")[0]).join("; ");

/** A form sent by one of our own pages. */
export function post(http: Http, path: string, form: Record<string, string | string[]> = {}, cookie = "") {
  const body = new URLSearchParams();
  for (const [name, value] of Object.entries(form)) for (const one of [value].flat()) body.append(name, one);
  const origin = process.env.APP_ORIGIN ?? "";
  return http
    .post(path)
    .set("Host", new URL(origin).host)
    .set("Origin", origin)
    .set("Cookie", cookie)
    .type("form")
    .send(body.toString());
}
