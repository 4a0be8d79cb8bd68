import { PassThrough } from "node:stream";
import { createReadableStreamFromReadable } from "@react-router/node";
import { renderToPipeableStream } from "react-dom/server";
import type { EntryContext, RouterContextProvider } from "react-router";
import { ServerRouter } from "react-router";
import { logFault } from "~/middleware/error-response.server";
import { requestContext } from "~/middleware/request-context";
import { NonceContext } from "~/ui/nonce";

export const streamTimeout = 8_000;

/** Renders a page. Signed-in pages are never kept by a shared cache, nor by the browser's after sign-out. */
export default function handleRequest(
  request: Request,
  status: number,
  headers: Headers,
  entry: EntryContext,
  context: RouterContextProvider,
) {
  if (request.method === "HEAD") return new Response(null, { status, headers });
  const nonce = process.env.NODE_ENV === "production" ? context.get(requestContext).nonce : undefined;
  return new Promise((resolve, reject) => {
    let hasShell = false;
    const { pipe, abort } = renderToPipeableStream(
      <NonceContext value={nonce}>
        <ServerRouter context={entry} url={request.url} nonce={nonce} />
      </NonceContext>,
      {
        nonce,
        // Nothing is sent behind the page to be put in place by script, however large a chart is.
        progressiveChunkSize: Number.POSITIVE_INFINITY,
        onShellReady() {
          hasShell = true;
        },
        // Loaders are done by now and only charts come later, from our own files: whole pages show them without script.
        onAllReady() {
          const body = new PassThrough();
          headers.set("Content-Type", "text/html; charset=utf-8");
          headers.set("Cache-Control", "no-store");
          resolve(new Response(createReadableStreamFromReadable(body), { headers, status }));
          pipe(body);
        },
        onShellError: reject,
        onError(error: unknown) {
          status = 500;
          if (hasShell) logFault(error);
        },
      },
    );
    setTimeout(abort, streamTimeout + 1000).unref();
  });
}

/** What the framework fetches for a navigation holds what the page holds, and is kept as little. */
export function handleDataRequest(response: Response) {
  response.headers.set("Cache-Control", "no-store");
  return response;
}

export function handleError(error: unknown, { request }: { request: Request }) {
  if (!request.signal.aborted) logFault(error);
}
