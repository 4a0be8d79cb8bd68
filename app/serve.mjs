/**
 * Serves the application: the production build, or in development the sources through Vite.
 * Stops cleanly on SIGTERM and SIGINT: no new requests, the running ones finish, then workers and database.
 */
import { createServer } from "node:http";

const development = process.env.NODE_ENV === "development";
process.env.NODE_ENV ??= "production";
const port = Number(process.env.PORT ?? 3000);
const host = process.env.HOST ?? "127.0.0.1";
const graceMs = 10_000;

/** @typedef {{ app: import("express").Express, begin: () => Promise<void>, end: () => Promise<void> }} Built */

async function load() {
  if (!development) {
    const address = new URL("../build/server/index.js", import.meta.url).href;
    return { built: /** @type {Built} */ (await import(address)), listener: undefined };
  }
  const { createServer: createVite } = await import("vite");
  const express = (await import("express")).default;
  const vite = await createVite({ server: { middlewareMode: true } });
  const outer = express();
  outer.use(vite.middlewares);
  outer.use(async (request, response, next) => {
    try {
      const source = /** @type {Built} */ (await vite.ssrLoadModule("./app/server.ts"));
      source.app(request, response, next);
    } catch (error) {
      if (error instanceof Error) vite.ssrFixStacktrace(error);
      next(error);
    }
  });
  return { built: /** @type {Built} */ (await vite.ssrLoadModule("./app/server.ts")), listener: outer };
}

try {
  const { built, listener } = await load();
  await built.begin();
  const server = createServer(listener ?? built.app);
  server.listen(port, host);
  await new Promise((resolve, reject) => {
    server.once("listening", () => resolve(undefined));
    server.once("error", reject);
  });
  console.log(`Listening on http://${host}:${port}`);
  let ending = false;
  const stop = async () => {
    if (ending) return;
    ending = true;
    const force = setTimeout(() => server.closeAllConnections(), graceMs);
    server.closeIdleConnections();
    await new Promise((resolve) => server.close(resolve));
    clearTimeout(force);
    await built.end();
    process.exit(0);
  };
  process.on("SIGTERM", stop);
  process.on("SIGINT", stop);
} catch (error) {
  console.error(error instanceof Error ? error.message : String(error));
  if (process.env.HALESIDE_DEBUG === "1") console.error(error);
  process.exit(1);
}
