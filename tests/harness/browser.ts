import { type ChildProcess, spawn } from "node:child_process";
import { mkdirSync, mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import AxeBuilder from "@axe-core/playwright";
import { type BrowserContext, chromium, type Page } from "playwright-core";
import { expect } from "vitest";
import { ROOT } from "../../app/platform/machine/places.mjs";
import { ensureTestBuild } from "./build";
import { atEnd } from "./closing";
import type { TestPerson } from "./people";
import { findPort } from "./ports";

/**
 * The served application in a browser.
 *
 *   const site = await openSite();                       // once per file: server, workers, mail service, Chromium
 *   const page = await site.newPage({ phone: true });    // a person's browser of its own
 *   await signIn(page, club.people.coach);
 *   await page.getByRole("link", { name: "Sessions" }).click();
 *   await axe(page);
 *
 * A page fails its test on any console error, page error or failed request. What a test means to provoke (the browser
 * logs a 400) it names: `newPage({ expectFailures: [/400/] })`. Mails: `site.mails(to)`.
 */
export type Site = Awaited<ReturnType<typeof start>>;

let started: Promise<Site> | undefined;

export function openSite(): Promise<Site> {
  started ??= start();
  return started;
}

async function start() {
  await ensureTestBuild();
  const [port, mailPort] = [await findPort(), await findPort()];
  const origin = `http://localhost:${port}`;
  const mail = `http://127.0.0.1:${mailPort}`;
  // Modules of the test process that make links speak of the same address.
  Object.assign(process.env, { APP_ORIGIN: origin, RESEND_BASE_URL: mail });
  const server = spawn(process.execPath, ["app/serve.mjs"], {
    cwd: ROOT,
    env: { ...process.env, NODE_ENV: "production", PORT: String(port), MAIL_FAKE_PORT: String(mailPort) },
    stdio: ["ignore", "pipe", "pipe"],
  });
  atEnd(() => stop(server));
  await listening(server);

  const profile = mkdtempSync(join(tmpdir(), "haleside-browser-"));
  const browser = await chromium.launch({
    executablePath: process.env.CHROMIUM_PATH || "/usr/bin/chromium",
    args: [
      "--no-sandbox",
      "--disable-gpu",
      "--disable-quic",
      "--no-first-run",
      "--disable-background-networking",
      "--disable-component-update",
      "--disable-sync",
    ],
    env: { ...process.env, HOME: profile },
  });
  atEnd(async () => {
    await browser.close();
    rmSync(profile, { recursive: true, force: true });
  });

  return {
    origin,
    /** A page in a browser of its own: another person, or the same on another device. */
    async newPage(given: PageOptions = {}): Promise<Page> {
      const context = await browser.newContext({
        baseURL: origin,
        locale: "en-GB",
        timezoneId: "Europe/London",
        serviceWorkers: given.serviceWorkers ?? "block",
        javaScriptEnabled: given.script ?? true,
        colorScheme: given.dark ? "dark" : "light",
        viewport: given.phone ? { width: 390, height: 844 } : { width: 1280, height: 800 },
        hasTouch: given.phone ?? false,
        reducedMotion: "reduce",
      });
      const page = await context.newPage();
      // A browser without script complains of every script that it does not run or fetch.
      const silenced = given.script === false ? [/Blocked script execution/, /^request: csp .*\.js$/] : [];
      watch(context, page, [...silenced, ...(given.expectFailures ?? [])]);
      return page;
    },
    /** Mails to an address, newest first. */
    async mails(to: string) {
      const answer = await fetch(`${mail}/inbox.json?to=${encodeURIComponent(to)}`);
      return ((await answer.json()) as { mails: { subject: string; text: string; html: string }[] }).mails;
    },
  };
}

export type PageOptions = {
  phone?: boolean;
  dark?: boolean;
  /** False: as in a browser without JavaScript. */
  script?: boolean;
  serviceWorkers?: "allow" | "block";
  /** Failures that the test means to provoke, matched against what would be reported. */
  expectFailures?: readonly RegExp[];
};

const failures = new WeakMap<Page, string[]>();

function watch(context: BrowserContext, page: Page, expected: readonly RegExp[]) {
  const met: string[] = [];
  failures.set(page, met);
  const note = (text: string) => {
    if (!expected.some((pattern) => pattern.test(text))) met.push(text);
  };
  page.on("console", (message) => {
    if (message.type() === "error") note(`console: ${message.text()} (${message.location().url})`);
  });
  page.on("pageerror", (error) => note(`error: ${error.message}`));
  page.on("requestfailed", (request) => {
    const reason = request.failure()?.errorText ?? "";
    // A navigation cuts off what the earlier page was still fetching.
    if (reason !== "net::ERR_ABORTED") note(`request: ${reason} ${request.url()}`);
  });
  page.on("request", (request) => {
    if (!request.url().startsWith("http://localhost:") && !request.url().startsWith("data:"))
      note(`third party: ${request.url()}`);
  });
  openPages.add(page);
  context.on("close", () => openPages.delete(page));
}

const openPages = new Set<Page>();

/** Fails on what went wrong in any page so far; put it in an `afterEach`. */
export function expectNoFailures() {
  const met = [...openPages].flatMap((page) => failures.get(page)?.splice(0) ?? []);
  expect(met).toEqual([]);
}

/** Closes every page, after asking whether one failed. */
export async function closePages() {
  const pages = [...openPages];
  try {
    expectNoFailures();
  } finally {
    for (const page of pages) await page.context().close();
  }
}

export async function signIn(page: Page, person: TestPerson) {
  await page.goto("/sign-in");
  await page.getByLabel("E-mail").fill(person.email);
  await page.getByLabel("Password").fill(person.password);
  await page.getByRole("button", { name: "Sign in" }).click();
  await page.waitForURL((url) => !url.pathname.startsWith("/sign-in"));
}

/** No violation of WCAG 2.2 A and AA or of axe's best practices on the page as it stands. */
export async function axe(page: Page) {
  const builder = new AxeBuilder({ page });
  // The preview of a mail stands in a frame without scripts, where the checker cannot run either.
  if ((await page.locator("iframe[sandbox]").count()) > 0)
    builder.setLegacyMode(true).exclude("iframe").options({ iframes: false });
  const { violations } = await builder.analyze();
  const told = violations.map(
    ({ id, help, nodes }) => `${id}: ${help}\n  ${nodes.map(({ html }) => html).join("\n  ")}`,
  );
  expect(told).toEqual([]);
}

/** A picture of the page under .haleside/pictures; gives its path. */
export async function picture(page: Page, name: string) {
  const folder = join(ROOT, ".haleside/pictures");
  mkdirSync(folder, { recursive: true });
  const path = join(folder, `${name}.png`);
  await page.screenshot({ path, fullPage: true });
  return path;
}

function listening(server: ChildProcess) {
  return new Promise<void>((resolve, reject) => {
    let said = "";
    const hear = (chunk: Buffer) => {
      said += chunk.toString();
      if (said.includes("Listening on")) resolve();
    };
    server.stdout?.on("data", hear);
    server.stderr?.on("data", hear);
    server.once("exit", (code) =>
      reject(new Error(`The server ended with code ${code}: ${said.slice(-2000)}`)),
    );
  });
}

function stop(server: ChildProcess) {
  if (server.exitCode !== null) return Promise.resolve();
  return new Promise<void>((resolve) => {
    server.once("exit", () => resolve());
    server.kill("SIGTERM");
  });
}
