import express, { type Response, Router } from "express";
import { z } from "zod";
import type { Faults } from "./faults.server";
import { type FakeInbox, type FakeMail, readAddress } from "./inbox.server";

const MAX_BODY = "5mb";
const MAX_RECIPIENTS = 50;

const mailboxSchema = z.string().refine((value) => z.email().safeParse(readAddress(value)).success, {
  error: "must be `email@example.org` or `Name <email@example.org>`",
});
const oneOrMoreSchema = z
  .union([mailboxSchema.transform((one) => [one]), z.array(mailboxSchema).min(1).max(MAX_RECIPIENTS)])
  .optional();
const sendSchema = z.object({
  from: mailboxSchema,
  to: oneOrMoreSchema.unwrap(),
  subject: z.string().min(1).max(998),
  html: z.string().optional(),
  text: z.string().optional(),
  reply_to: oneOrMoreSchema,
  headers: z.record(z.string(), z.string()).optional(),
});

/** The error shape of the real service's published reference. */
function refuse(response: Response, statusCode: number, name: string, message: string) {
  response.status(statusCode).json({ statusCode, name, message });
}

/** `POST /emails` and `GET /emails/:id` as the real service speaks them. */
export function createMailApi(options: {
  apiKey: string;
  inbox: FakeInbox;
  faults: Faults;
  onAccepted: (mail: FakeMail) => void;
}) {
  const { apiKey, inbox, faults, onAccepted } = options;
  const router = Router();

  router.use("/emails", (request, response, next) => {
    if (faults.isDown()) return void request.socket.destroy();
    const authorization = request.get("authorization");
    if (!authorization) {
      return refuse(response, 401, "missing_api_key", "Missing API key in the authorization header.");
    }
    if (authorization !== `Bearer ${apiKey}`) {
      return refuse(response, 403, "invalid_api_key", "API key is invalid.");
    }
    next();
  });

  router.post("/emails", express.json({ limit: MAX_BODY }), (request, response) => {
    const fault = faults.takeNext();
    // The answer never comes; the socket is freed when the sender gives up or the fake closes.
    if (fault?.fault === "no-answer") return;
    if (typeof fault?.fault === "number") {
      return playStatus(response, fault.fault, fault.retryAfterSeconds);
    }

    const key = request.get("idempotency-key") ?? null;
    if (key !== null && (key.length < 1 || key.length > 256)) {
      return refuse(response, 400, "invalid_idempotency_key", "The key must be between 1-256 chars.");
    }
    const missing = ["from", "to", "subject"].filter((field) => !request.body?.[field]);
    if (missing.length > 0) {
      return refuse(response, 422, "missing_required_field", `Missing \`${missing.join("`, `")}\` field.`);
    }
    const parsed = sendSchema.safeParse(request.body);
    if (!parsed.success) {
      const issue = parsed.error.issues[0];
      return refuse(
        response,
        422,
        "validation_error",
        `Invalid \`${issue?.path.join(".")}\`: ${issue?.message}`,
      );
    }
    const { from, to, subject, html, text, reply_to: replyTo, headers } = parsed.data;
    if (!html && !text)
      return refuse(response, 422, "missing_required_field", "Missing `html` or `text` field.");

    const result = inbox.accept(
      {
        from,
        to,
        subject,
        html: html ?? null,
        text: text ?? null,
        replyTo: replyTo ?? [],
        headers: headers ?? {},
      },
      key,
    );
    if (result.outcome === "other-body") {
      const message = "Same idempotency key used with a different request payload.";
      return refuse(response, 409, "invalid_idempotent_request", message);
    }
    if (result.outcome === "taken") onAccepted(result.mail);
    if (fault?.fault === "lost-answer") return void request.socket.destroy();
    response.json({ id: result.id });
  });

  router.get("/emails/:id", (request, response) => {
    const mail = inbox.find(request.params.id);
    if (!mail) return refuse(response, 404, "not_found", "Email not found");
    response.json({
      object: "email",
      id: mail.id,
      to: mail.to,
      from: mail.from,
      created_at: mail.createdAt.toISOString(),
      subject: mail.subject,
      html: mail.html,
      text: mail.text,
      bcc: [],
      cc: [],
      reply_to: mail.replyTo,
      last_event: mail.events.at(-1)?.type.replace("email.", "") ?? "queued",
      scheduled_at: null,
    });
  });

  return router;
}

function playStatus(response: Response, status: 403 | 422 | 429 | 500 | 503, retryAfterSeconds: number) {
  switch (status) {
    case 403:
      return refuse(response, 403, "invalid_api_key", "API key is invalid.");
    case 422:
      return refuse(response, 422, "validation_error", "We found an error with one or more fields.");
    case 429:
      response.set("retry-after", String(retryAfterSeconds));
      return refuse(response, 429, "rate_limit_exceeded", "Too many requests.");
    case 500:
      return refuse(response, 500, "internal_server_error", "An unexpected error occurred.");
    case 503:
      // A proxy before the service answers a page, not JSON.
      return void response.status(503).type("html").send("<h1>Service unavailable</h1>");
  }
}
