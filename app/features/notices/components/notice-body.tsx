import type { ReactNode } from "react";
import { formatDay } from "~/platform/days";
import { Note } from "~/ui";
import type { NoticeContent } from "../notice-content";
import { textBlocks } from "../text-blocks";

/** A number to press; on a phone it dials. */
export function PhoneLink({ phone, large = false }: { phone: string; large?: boolean }) {
  return (
    <a
      href={`tel:${phone.replace(/\(0\)/g, "").replace(/[^\d+]/g, "")}`}
      className={`inline-flex min-h-target items-center font-semibold whitespace-nowrap text-lagoon underline underline-offset-4 ${large ? "text-xl" : ""}`}
    >
      {phone}
    </a>
  );
}

/** Typed text as paragraphs and lists. */
export function PlainText({ text }: { text: string }) {
  return textBlocks(text).map((block, index) =>
    block.kind === "paragraph" ? (
      // biome-ignore lint/suspicious/noArrayIndexKey: typed text has no ids and does not move
      <p key={index} className="mb-2">
        {block.text}
      </p>
    ) : (
      // biome-ignore lint/suspicious/noArrayIndexKey: as above
      <ul key={index} className="mb-2 list-disc space-y-1 pl-6">
        {block.items.map((item) => (
          <li key={item}>{item}</li>
        ))}
      </ul>
    ),
  );
}

function Part({ heading, as: Heading, children }: { heading: string; as: "h2" | "h4"; children: ReactNode }) {
  return (
    <section className="mt-6 border-0 border-t border-line pt-4" data-keep-together>
      <Heading className="mb-1.5 text-lg font-semibold">{heading}</Heading>
      {children}
    </section>
  );
}

/** What a family reads behind the link: large, plain, in the order in which it is needed. */
export function NoticeBody({ content, as = "h2" }: { content: NoticeContent; as?: "h2" | "h4" }) {
  const { day, time, where, happened, done, doNow, watchFor, emergency, call } = content;
  return (
    <div className="max-w-prose text-[1.2rem] leading-[1.55]">
      <p>
        {formatDay(day, "full")}
        {time ? ` at ${time}` : ""}
        {where ? <span className="block">{where}</span> : null}
      </p>
      <Part as={as} heading="What happened">
        <PlainText text={happened} />
      </Part>
      {done ? (
        <Part as={as} heading="What we did">
          <PlainText text={done} />
        </Part>
      ) : null}
      <Part as={as} heading="What to do now">
        <PlainText text={doNow} />
      </Part>
      <Part as={as} heading="What to watch for">
        <PlainText text={watchFor} />
        <Note kind="serious" title="When to call the emergency services">
          <PlainText text={emergency} />
        </Note>
      </Part>
      <Part as={as} heading="Whom to call">
        <p>Ask for {call.name}.</p>
        <PhoneLink phone={call.phone} large />
        {call.hours ? <p>{call.hours}</p> : null}
      </Part>
    </div>
  );
}
