import type { ReactNode } from "react";
import {
  Button,
  Field,
  Form,
  type FormErrors,
  type FormValues,
  Mark,
  Note,
  Page,
  SkipLink,
  TextInput,
} from "~/ui";
import type { FamilyPage } from "../door.server";
import { NoticeBody, PhoneLink } from "./notice-body";

type Answer = { errors?: FormErrors; values?: FormValues } | undefined;
type Open = Extract<FamilyPage, { state: "open" }>;

const doneWords: Record<string, { title: string; text: string }> = {
  acknowledged: { title: "Thank you", text: "We can see that you have read it." },
  call: { title: "Thank you", text: "We will call you." },
  fresh: {
    title: "Look in your e-mail",
    text: "If we may write to you, a new link is on its way to the address that we have. It can take a few minutes.",
  },
  stopped: {
    title: "We have stopped these e-mails",
    text: "From now on we will phone you. Please make sure that we have your right number.",
  },
};

/** The frame: who it is from, and at the end how to reach them. */
export function FamilyFrame(props: { page: FamilyPage; done: string | null; children: ReactNode }) {
  const { page, done, children } = props;
  const note = done ? doneWords[done] : undefined;
  return (
    <>
      <SkipLink />
      <header className="on-dark bg-bar text-on-bar print:border-0 print:border-b print:bg-transparent print:text-ink">
        <p className="mx-auto flex min-h-14 max-w-page items-center gap-2.5 px-4 text-lg font-medium sm:px-6 xl:px-0">
          <Mark className="h-7 w-7 text-sand" />
          {page.organisation}
        </p>
      </header>
      <Page width="text" bottomNav={false}>
        {note ? (
          <Note kind="settled" title={note.title} role="status">
            <p>{note.text}</p>
          </Note>
        ) : null}
        {children}
        {page.state === "open" ? null : (
          <p className="mt-10 max-w-prose border-0 border-t border-line pt-4 text-soft">
            Not sure that this is really from us? Call us on a number that you know.
          </p>
        )}
      </Page>
    </>
  );
}

function CallUs({ page }: { page: FamilyPage }) {
  return (
    <div className="my-5 text-[1.2rem]">
      <p>You can always call us:</p>
      <PhoneLink phone={page.phone} large />
      {page.hours ? <p>{page.hours}</p> : null}
    </div>
  );
}

/** Before it opens: one thing that the guardian knows. */
export function FamilyQuestion({
  page,
  answer,
}: {
  page: Extract<FamilyPage, { state: "question" }>;
  answer: Answer;
}) {
  const left = page.triesLeft;
  return (
    <>
      <h1 className="mb-3 text-2xl">We have news for you</h1>
      <p className="mb-5 max-w-prose text-[1.2rem]">
        It is about an athlete in your care. To keep it safe, we ask one thing that you know.
      </p>
      <Form
        reloadDocument
        errors={answer?.errors}
        values={answer?.values}
        summaryTitle="It has not opened yet"
      >
        <Field
          name="answer"
          label="When was the athlete born?"
          help="The day first, then the month, then the year. For example 27 3 2012 or 27 March 2012."
        >
          <TextInput autoComplete="off" size="large" width="medium" />
        </Field>
        <Button look="primary" size="large" name="intent" value="answer">
          Open the news
        </Button>
        {left < 5 && !answer?.errors ? (
          <p className="mt-3 text-soft">
            You can try {left} more {left === 1 ? "time" : "times"}. Then this link closes.
          </p>
        ) : null}
      </Form>
      <CallUs page={page} />
    </>
  );
}

/** Expired, locked or closed: one page for all of them, since the reason may be nobody's business here. */
export function FamilyShut(props: { page: FamilyPage; answer: Answer; done: string | null }) {
  const { page, answer, done } = props;
  return (
    <>
      <h1 className="mb-3 text-2xl">This link no longer works</h1>
      <p className="max-w-prose text-[1.2rem]">
        Links close after some days, and after five wrong answers. If it is urgent, please call us.
      </p>
      <CallUs page={page} />
      {done === "fresh" ? null : (
        <Form reloadDocument errors={answer?.errors}>
          <p className="mb-3 max-w-prose text-[1.2rem]">
            We can send a new link to the e-mail address that we have for you.
          </p>
          <Button look="primary" size="large" name="intent" value="fresh-link">
            Send me a new link
          </Button>
        </Form>
      )}
    </>
  );
}

/** The news itself, and what the guardian may answer. */
export function FamilyOpen({ page, answer }: { page: Open; answer: Answer }) {
  const { content, urgent, acknowledged, callAsked, mailStopped } = page;
  return (
    <>
      <h1 className="mb-2 text-2xl">News about {content.childName}</h1>
      {urgent ? (
        <Note kind="serious" title="This is urgent">
          <p>If you have not spoken with us yet, please call us now.</p>
          <PhoneLink phone={content.call.phone} large />
        </Note>
      ) : null}
      <NoticeBody content={content} />
      <div className="mt-8 border-0 border-t border-line pt-5 print:hidden">
        {acknowledged ? (
          <p className="mb-5 font-semibold">You have told us that you have read this.</p>
        ) : (
          <Form reloadDocument errors={answer?.errors} className="mb-8">
            <Button look="primary" size="large" name="intent" value="acknowledge">
              I have read this
            </Button>
          </Form>
        )}
        <Form
          reloadDocument
          values={answer?.values}
          errors={acknowledged ? answer?.errors : undefined}
          idPrefix="call"
        >
          <h2 className="mb-2 text-lg font-semibold">Do you want us to call you?</h2>
          {callAsked ? (
            <p className="mb-3">You have asked for a call. You can ask again with another time.</p>
          ) : null}
          <Field name="when" label="When does it suit you?" help="For example: tonight after 6." optional>
            <TextInput autoComplete="off" maxLength={200} />
          </Field>
          <Button size="large" name="intent" value="ask-call">
            Please call me
          </Button>
        </Form>
        {mailStopped ? null : (
          <p className="mt-8">
            <a
              href="?stop=1"
              className="inline-flex min-h-target items-center text-lagoon underline underline-offset-4"
            >
              Stop e-mails like this
            </a>
          </p>
        )}
      </div>
      <p className="mt-6 max-w-prose text-soft">
        This page closes by itself after 30 minutes. You can open it again with the link in your e-mail. The
        advice of your doctor comes before ours.
      </p>
    </>
  );
}

/** The wish for no more e-mail, asked once more since it has a price. */
export function StopMail({ page, answer }: { page: FamilyPage; answer: Answer }) {
  return (
    <>
      <h1 className="mb-3 text-2xl">Stop these e-mails?</h1>
      <p className="mb-5 max-w-prose text-[1.2rem]">
        Then {page.organisation} can only reach you by phone when there is news about the athlete in your
        care.
      </p>
      <Form reloadDocument errors={answer?.errors}>
        <Button look="danger" size="large" name="intent" value="stop-mail">
          Stop these e-mails
        </Button>
      </Form>
      <p className="mt-3">
        <a
          href="?"
          className="inline-flex min-h-target items-center text-lagoon underline underline-offset-4"
        >
          No, keep them
        </a>
      </p>
      <CallUs page={page} />
    </>
  );
}
