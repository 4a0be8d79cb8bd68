import type { AddressInfo } from "node:net";
import express, { type NextFunction, type Request, type Response } from "express";
import { z } from "zod";
import { createMailApi } from "./fake/api.server";
import { createFaults, faultSchema } from "./fake/faults.server";
import { createFakeInbox, type FakeMail, findLinks } from "./fake/inbox.server";
import { renderInboxPage, renderMailPage, renderNotFoundPage } from "./fake/pages.server";
import { createWebhookSender } from "./fake/webhooks.server";

export type FakeResendOptions = {
  /** 0 takes a free one. */
  port: number;
  /** The only bearer key that is let in. */
  apiKey: string;
  /** Where events are posted; left out, none are. */
  webhookUrl?: string;
  /** `whsec_` and base64; needed with `webhookUrl`. */
  webhookSecret?: string;
  /** Milliseconds before each attempt of a webhook. */
  webhookDelaysMs?: number[];
  /** Mails kept at most; the oldest go first. */
  limit?: number;
};

export type FakeResend = Awaited<ReturnType<typeof startFakeResend>>;

const DEFAULT_LIMIT = 2000;

/**
 * Starts a stand-in for the mail service on 127.0.0.1: its HTTP interface (`/emails`), its webhooks, an inbox
 * to read in a browser (`/`) or a test (`/inbox.json?to=`), and faults on demand (`/control/...`).
 * Everything is in memory and gone when it closes.
 */
export async function startFakeResend(options: FakeResendOptions) {
  const inbox = createFakeInbox({ limit: options.limit ?? DEFAULT_LIMIT });
  const faults = createFaults();
  const webhooks = createWebhookSender({
    target: readTarget(options.webhookUrl, options.webhookSecret),
    attemptDelaysMs: options.webhookDelaysMs,
  });

  const app = express();
  app.disable("x-powered-by");
  app.use(refuseForeignHosts);
  app.use(createMailApi({ apiKey: options.apiKey, inbox, faults, onAccepted: webhooks.start }));

  app.get("/", (_request, response) => void response.type("html").send(renderInboxPage(inbox.list())));
  app.get("/inbox.json", (request, response) => {
    const to = z.string().optional().catch(undefined).parse(request.query.to);
    response.json({ mails: inbox.list(to).map(toJson) });
  });
  app.get("/mails/:id", (request, response) => {
    const mail = inbox.find(request.params.id);
    if (!mail) return void response.status(404).type("html").send(renderNotFoundPage());
    response.type("html").send(renderMailPage(mail));
  });
  app.get("/mails/:id/html", (request, response) => {
    const html = inbox.find(request.params.id)?.html;
    if (!html) return void response.status(404).type("html").send(renderNotFoundPage());
    // Nothing in a mail may run or be fetched; its links open outside the frame.
    response.set(
      "content-security-policy",
      "default-src 'none'; style-src 'unsafe-inline'; sandbox allow-popups allow-popups-to-escape-sandbox",
    );
    response.type("html").send(html);
  });

  app.use("/control", express.json());
  app.post("/control/fail", (request, response) => {
    const fault = faultSchema.safeParse(request.body);
    if (!fault.success) return void response.status(400).json({ error: z.prettifyError(fault.error) });
    faults.failNext(fault.data);
    response.status(204).end();
  });
  app.post("/control/down", (request, response) => {
    const body = z.object({ down: z.boolean() }).safeParse(request.body);
    if (!body.success)
      return void response.status(400).json({ error: 'Send {"down": true} or {"down": false}' });
    faults.setDown(body.data.down);
    response.status(204).end();
  });
  app.post("/control/clear", (_request, response) => {
    inbox.clear();
    faults.clear();
    response.status(204).end();
  });
  app.use((_request, response) => {
    response
      .status(404)
      .json({ statusCode: 404, name: "not_found", message: "The requested endpoint does not exist." });
  });
  app.use(answerUnreadableBody);

  const server = app.listen(options.port, "127.0.0.1");
  await new Promise<void>((resolve, reject) => {
    server.once("listening", resolve);
    server.once("error", reject);
  });
  const { port } = server.address() as AddressInfo;

  return {
    url: `http://127.0.0.1:${port}`,
    inbox,
    faults,
    /** For tests whose application gets its port only after this has started. */
    setWebhook(url: string, secret: string) {
      webhooks.setTarget(readTarget(url, secret));
    },
    async close() {
      webhooks.close();
      server.closeAllConnections();
      await new Promise<void>((resolve) => server.close(() => resolve()));
    },
  };
}

function readTarget(url: string | undefined, secret: string | undefined) {
  if (url === undefined) return undefined;
  if (!secret?.startsWith("whsec_"))
    throw new Error("The mail webhook secret must be `whsec_` followed by base64");
  return { url, secret };
}

/** A page elsewhere could point its own name at 127.0.0.1 and read the mails: only our own names are served. */
function refuseForeignHosts(request: Request, response: Response, next: NextFunction) {
  if (["127.0.0.1", "localhost"].includes(request.hostname)) return next();
  response
    .status(403)
    .json({ statusCode: 403, name: "invalid_access", message: "Served to this machine alone." });
}

function answerUnreadableBody(error: unknown, _request: Request, response: Response, next: NextFunction) {
  if (response.headersSent) return next(error);
  const status = z.object({ status: z.number().min(400).max(499) }).safeParse(error);
  if (!status.success) return next(error);
  const message = "The request body could not be read as JSON.";
  response
    .status(status.data.status)
    .json({ statusCode: status.data.status, name: "validation_error", message });
}

function toJson(mail: FakeMail) {
  return { ...mail, createdAt: mail.createdAt.toISOString(), links: findLinks(mail.text) };
}
