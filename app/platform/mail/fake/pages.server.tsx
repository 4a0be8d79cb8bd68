import type { ReactNode } from "react";
import { renderToStaticMarkup } from "react-dom/server";
import { mailColours } from "../mail-colours";
import { type FakeMail, findLinks } from "./inbox.server";

const { light, dark, head } = mailColours;

const styles = `
:root { color-scheme: light dark; }
* { box-sizing: border-box; }
body { margin: 0; background: ${light.page}; color: ${light.text}; font: 17px/1.5 Rubik, system-ui, sans-serif; }
header { background: ${head.ground}; color: ${head.text}; padding: 14px 20px; }
header a { color: inherit; font-weight: 600; text-decoration: none; }
main { max-width: 760px; margin: 0 auto; padding: 20px; }
h1 { font-size: 1.45em; line-height: 1.25; margin: 0 0 8px; overflow-wrap: anywhere; }
h2 { font-size: 1.1em; margin: 28px 0 8px; }
a { color: ${light.primary}; }
ul, ol { list-style: none; margin: 0; padding: 0; }
li { border-top: 1.5px solid ${light.line}; }
li:last-child { border-bottom: 1.5px solid ${light.line}; }
li a { display: block; padding: 12px 0; min-height: 44px; overflow-wrap: anywhere; }
p, dd, .soft { overflow-wrap: anywhere; }
.soft { color: ${light.soft}; font-size: 0.88em; display: block; }
dl { display: grid; grid-template-columns: max-content minmax(0, 1fr); gap: 4px 14px; margin: 0; }
dt { color: ${light.soft}; } dd { margin: 0; }
pre { white-space: pre-wrap; overflow-wrap: anywhere; font: inherit; background: ${light.paper};
  border: 1.5px solid ${light.line}; border-radius: 6px; padding: 14px; margin: 0; }
iframe { width: 100%; height: 760px; border: 1.5px solid ${light.line}; border-radius: 6px; background: ${light.paper}; }
:focus-visible { outline: 3px solid ${light.primary}; outline-offset: 2px; }
@media (prefers-color-scheme: dark) {
  body { background: ${dark.page}; color: ${dark.text}; }
  a { color: ${dark.primary}; }
  li, li:last-child, pre, iframe { border-color: ${dark.line}; }
  pre, iframe { background: ${dark.paper}; }
  .soft, dt { color: ${dark.soft}; }
  :focus-visible { outline-color: ${dark.primary}; }
}`;

function renderPage(title: string, content: ReactNode) {
  const page = (
    <html lang="en-GB">
      <head>
        <meta charSet="utf-8" />
        <meta name="viewport" content="width=device-width, initial-scale=1" />
        <title>{title}</title>
        <link rel="icon" href="data:," />
        <style>{styles}</style>
      </head>
      <body>
        <header>
          <a href="/">Haleside: mail of this machine</a>
        </header>
        <main>{content}</main>
      </body>
    </html>
  );
  return `<!doctype html>${renderToStaticMarkup(page)}`;
}

/** The list of mails, newest first. */
export function renderInboxPage(mails: readonly FakeMail[]) {
  return renderPage(
    "Mail of this machine",
    <>
      <h1>
        {mails.length === 0
          ? "No mail yet"
          : `${mails.length} mail${mails.length === 1 ? "" : "s"}, newest first`}
      </h1>
      <p>
        Nothing here leaves this machine: development and tests send to this page instead of the mail service.
        {mails.length === 0 && " Send an invitation or a notice, and reload."}
      </p>
      <ul>
        {mails.map((mail) => (
          <li key={mail.id}>
            <a href={`/mails/${mail.id}`}>
              {mail.subject}
              <span className="soft">
                to {mail.to.join(", ")}, {formatInstant(mail.createdAt)}, {lastEvent(mail)}
              </span>
            </a>
          </li>
        ))}
      </ul>
    </>,
  );
}

/** One mail: its head, its links, its way, both parts. */
export function renderMailPage(mail: FakeMail) {
  const links = findLinks(mail.text);
  return renderPage(
    mail.subject,
    <>
      <h1>{mail.subject}</h1>
      <dl>
        <dt>From</dt>
        <dd>{mail.from}</dd>
        <dt>To</dt>
        <dd>{mail.to.join(", ")}</dd>
        <dt>At</dt>
        <dd>{formatInstant(mail.createdAt)}</dd>
      </dl>
      {links.length > 0 && (
        <>
          <h2>Links in it</h2>
          <ul id="links">
            {links.map((link) => (
              <li key={link}>
                <a href={link} target="_blank" rel="noreferrer">
                  {link}
                </a>
              </li>
            ))}
          </ul>
        </>
      )}
      <h2>HTML part</h2>
      {mail.html === null ? (
        <p>This mail has none.</p>
      ) : (
        <iframe
          title="HTML part"
          src={`/mails/${mail.id}/html`}
          sandbox="allow-popups allow-popups-to-escape-sandbox"
        />
      )}
      <h2>Plain text part</h2>
      {mail.text === null ? <p>This mail has none.</p> : <pre>{mail.text}</pre>}
      <h2>Its way</h2>
      <ol>
        {mail.events.map((event) => (
          <li key={`${event.type} ${event.at.getTime()}`}>
            {event.type.replace("email.", "")}
            <span className="soft">
              {formatInstant(event.at)}, webhook: {event.webhook}
            </span>
          </li>
        ))}
      </ol>
    </>,
  );
}

export function renderNotFoundPage() {
  return renderPage(
    "No such mail",
    <>
      <h1>No such mail</h1>
      <p>
        Mails are kept until this service stops. <a href="/">See what is here now</a>.
      </p>
    </>,
  );
}

function formatInstant(at: Date) {
  return at.toLocaleString("en-GB", { dateStyle: "medium", timeStyle: "medium" });
}

function lastEvent(mail: FakeMail) {
  return mail.events.at(-1)?.type.replace("email.", "") ?? "queued";
}
