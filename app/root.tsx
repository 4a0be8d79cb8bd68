import { type ReactNode, useContext } from "react";
import {
  isRouteErrorResponse,
  Links,
  Meta,
  Outlet,
  Scripts,
  ScrollRestoration,
  useRouteError,
} from "react-router";
import { guardAccess } from "~/middleware/access";
import { ButtonLink, Page, PageHeading, SkipLink, TopBar } from "~/ui";
import { fontPreloads } from "~/ui/fonts";
import { NonceContext } from "~/ui/nonce";
import "./app.css";

export const middleware = [guardAccess];

export const links = () => [
  ...fontPreloads,
  { rel: "icon", href: "/icon.svg", type: "image/svg+xml" },
  { rel: "apple-touch-icon", href: "/apple-touch-icon.png" },
  { rel: "manifest", href: "/site.webmanifest" },
];

export const meta = () => [{ title: "Haleside" }];

export function Layout({ children }: { children: ReactNode }) {
  return (
    <html lang="en-GB">
      <head>
        <meta charSet="utf-8" />
        <meta name="viewport" content="width=device-width, initial-scale=1, viewport-fit=cover" />
        <meta name="theme-color" content="#17202f" />
        {/* Where the interface's parts that add a style element find the nonce. */}
        <meta property="csp-nonce" nonce={useContext(NonceContext)} suppressHydrationWarning />
        <Meta />
        <Links />
      </head>
      <body>
        {children}
        <ScrollRestoration />
        <Scripts />
      </body>
    </html>
  );
}

export default function Root() {
  return <Outlet />;
}

const wordsOf: Record<number, string> = {
  401: "Sign in first",
  403: "Not part of your role",
  404: "Not found",
  409: "Changed meanwhile",
  410: "No longer there",
  429: "Too many attempts",
  503: "Busy for the moment",
};

function explain(error: unknown) {
  if (!isRouteErrorResponse(error))
    return {
      heading: "Something went wrong here",
      text: "It is our fault, not yours, and it has been recorded. Nothing that was saved is lost. Go back and try again.",
    };
  const message = (error.data as { message?: unknown } | null)?.message;
  return {
    heading: wordsOf[error.status] ?? "That did not work",
    text: typeof message === "string" ? message : "The address may be wrong, or the page may have moved.",
  };
}

export function ErrorBoundary() {
  const { heading, text } = explain(useRouteError());
  return (
    <>
      <title>{`${heading} - Haleside`}</title>
      <SkipLink />
      <TopBar name="Haleside" home="/" />
      <Page width="text" bottomNav={false}>
        <PageHeading>{heading}</PageHeading>
        <p className="mb-6 max-w-prose">{text}</p>
        <ButtonLink to="/">Go to the first page</ButtonLink>
      </Page>
    </>
  );
}
