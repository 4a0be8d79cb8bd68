import type { NextFunction, Request, Response } from "express";
import helmet from "helmet";
import { env } from "./env.server";

/**
 * Each header is set here and nowhere else. Nonces in production builds only: the development server injects its own
 * scripts. Inline style attributes stay allowed, since charts set them; style elements need the nonce or our origin.
 */
export function securityHeaders(request: Request, response: Response, next: NextFunction) {
  const { NODE_ENV, APP_ORIGIN } = env();
  const production = NODE_ENV === "production";
  const secure = APP_ORIGIN.startsWith("https://");
  const nonce = `'nonce-${String(response.locals.nonce)}'`;
  helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'self'"],
        scriptSrc: production ? ["'self'", nonce] : ["'self'", "'unsafe-inline'"],
        styleSrc: production ? ["'self'", nonce] : ["'self'", "'unsafe-inline'"],
        styleSrcAttr: ["'unsafe-inline'"],
        imgSrc: ["'self'", "data:", "blob:"],
        fontSrc: ["'self'"],
        connectSrc: production ? ["'self'"] : ["'self'", "ws:"],
        workerSrc: ["'self'"],
        manifestSrc: ["'self'"],
        objectSrc: ["'none'"],
        baseUri: ["'none'"],
        formAction: ["'self'"],
        frameAncestors: ["'none'"],
        ...(secure ? { upgradeInsecureRequests: [] } : {}),
      },
    },
    strictTransportSecurity: secure ? { maxAge: 31_536_000, includeSubDomains: false } : false,
    // Guardian links carry a token in their path: it never leaves to another site. Not "no-referrer", which makes
    // browsers send "Origin: null" with our own forms, so that the origin check could not tell them from foreign ones.
    referrerPolicy: { policy: "same-origin" },
    crossOriginEmbedderPolicy: false,
  })(request, response, () => {
    response.setHeader("Permissions-Policy", "camera=(), microphone=(), geolocation=()");
    next();
  });
}
