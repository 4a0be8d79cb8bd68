import type { NextFunction, Request, Response } from "express";
import { env } from "./env.server";

/** Addresses that prove their sender by a signature instead. */
const signed = new Set(["/webhooks/mail"]);

/**
 * Every request that may change something must come from our own pages: by Sec-Fetch-Site where the browser sends
 * it, else by Origin, else it is refused. Resource routes are covered too, which the framework's own check is not.
 */
export function checkOrigin(request: Request, response: Response, next: NextFunction) {
  if (request.method === "GET" || request.method === "HEAD" || signed.has(request.path)) return next();
  const site = request.get("sec-fetch-site");
  const sent = request.get("origin");
  const sameOrigin = sent === env().APP_ORIGIN;
  const allowed = site ? site === "same-origin" && (!sent || sameOrigin) : sameOrigin;
  if (allowed) return next();
  response.status(403).type("text/plain").send("This request did not come from Haleside's own pages.");
}
