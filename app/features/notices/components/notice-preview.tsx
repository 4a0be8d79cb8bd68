import { Disclosure, Region } from "~/ui";
import type { NoticeContent } from "../notice-content";
import { NoticeBody } from "./notice-body";

export type ShownPreview = {
  content: NoticeContent;
  mails: {
    guardianId: string;
    to: string;
    name: string;
    mail: { subject: string; html: string; text: string };
  }[];
};

/** The notice exactly as it will arrive. The link in it leads nowhere yet: each guardian's own is made on sending. */
export function NoticePreview({ preview }: { preview: ShownPreview }) {
  const { content, mails } = preview;
  return (
    <Region heading="As it will arrive" id="preview">
      <p className="mb-4 max-w-prose text-soft">
        The e-mail carries no name of the athlete and nothing about health beyond that there is news. The page
        opens only with the athlete's date of birth.
      </p>
      {mails.map(({ guardianId, to, name, mail }, index) => (
        <Disclosure key={guardianId} summary={`The e-mail to ${name}`} open={index === 0}>
          <dl className="mb-3">
            <div className="flex gap-3">
              <dt className="text-soft">To</dt>
              <dd className="min-w-0 break-words">{to}</dd>
            </div>
            <div className="flex gap-3">
              <dt className="text-soft">Subject</dt>
              <dd>{mail.subject}</dd>
            </div>
          </dl>
          <iframe
            title={`E-mail to ${name}`}
            sandbox=""
            srcDoc={mail.html}
            className="h-[40rem] w-full rounded-md border border-line bg-paper"
          />
          <details className="mt-2">
            <summary className="inline-flex min-h-target items-center text-lagoon underline underline-offset-4">
              The same as plain text
            </summary>
            <pre className="overflow-x-auto whitespace-pre-wrap border-0 border-l border-line pl-4 font-sans text-sm">
              {mail.text}
            </pre>
          </details>
        </Disclosure>
      ))}
      <Disclosure summary="The page behind the link" open>
        <h3 className="text-xl font-semibold">News about {content.childName}</h3>
        <NoticeBody content={content} as="h4" />
      </Disclosure>
    </Region>
  );
}
