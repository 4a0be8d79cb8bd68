import { randomBytes, randomUUID } from "node:crypto";
import { createRequestHandler } from "@react-router/express";
import compression from "compression";
import express from "express";
import { RouterContextProvider } from "react-router";
import { assertApplicationRole, closeDatabase } from "~db/client.server";
import { closeIdentity } from "./features/accounts/identity.server";
import { startWorkers, stopWorkers } from "./features/jobs.server";
import { requestContext } from "./middleware/request-context";
import { env } from "./platform/env.server";
import { log } from "./platform/log.server";
import { checkOrigin } from "./platform/origin-check.server";
import { securityHeaders } from "./platform/security-headers.server";

/** The Express application: static files, headers, the origin check, then React Router. Supertest drives it too. */
export function createApp() {
  const { TRUSTED_PROXIES, NODE_ENV } = env();
  const app = express();
  app.disable("x-powered-by");
  app.set("trust proxy", TRUSTED_PROXIES === "" ? false : TRUSTED_PROXIES.split(","));
  app.use((request, response, next) => {
    response.locals.requestId = randomUUID();
    response.locals.nonce = randomBytes(16).toString("base64url");
    const started = performance.now();
    response.on("finish", () => {
      // The pattern, never the path: paths hold link tokens and ids.
      log.info(
        {
          requestId: response.locals.requestId,
          method: request.method,
          pattern: response.locals.pattern ?? "static",
          status: response.statusCode,
          ms: Math.round(performance.now() - started),
        },
        "request",
      );
    });
    next();
  });
  app.use(securityHeaders);
  app.use(compression());
  if (NODE_ENV === "production") {
    app.use("/assets", express.static("build/client/assets", { immutable: true, maxAge: "1y" }));
    app.use(express.static("build/client", { maxAge: "1h", index: false }));
  }
  app.use(checkOrigin);
  app.use(
    createRequestHandler({
      build: () => import("virtual:react-router/server-build"),
      mode: NODE_ENV,
      getLoadContext: (request, response) => {
        const context = new RouterContextProvider();
        context.set(requestContext, {
          id: response.locals.requestId as string,
          nonce: response.locals.nonce as string,
          clientAddress: request.ip ?? "unknown",
          notePattern: (pattern) => {
            response.locals.pattern = pattern;
          },
        });
        return context;
      },
    }),
  );
  return app;
}

export const app = createApp();

/** Checks what must hold before the first request and starts the workers. */
export async function begin() {
  // Loads every route now, so that a fault in one shows at the start and not with its first visitor.
  await import("virtual:react-router/server-build");
  await assertApplicationRole();
  await startWorkers();
}

export async function end() {
  await stopWorkers();
  await closeIdentity();
  await closeDatabase();
}
