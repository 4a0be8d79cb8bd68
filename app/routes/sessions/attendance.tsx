import { data, Form as PlainForm, redirect, type ShouldRevalidateFunctionArgs } from "react-router";
import { openAttendance, submitAttendance } from "~/features/sessions/attendance-page.server";
import { AttendanceRows } from "~/features/sessions/components/attendance-rows";
import { AttendanceConflict } from "~/features/sessions/components/conflict-note";
import { countOf, sessionMoment, sessionTitle } from "~/features/sessions/session-words";
import { memberAction, memberLoader } from "~/middleware/handlers.server";
import {
  Button,
  Disclosure,
  Field,
  Form,
  type FormErrors,
  type FormValues,
  formValues,
  Note,
  NumberInput,
  Page,
  PageHeading,
  Region,
  TextLink,
} from "~/ui";
import { inputClasses } from "~/ui/input-classes";
import { read } from "~db/client.server";
import type { Route } from "./+types/attendance";

export const loader = memberLoader(({ scope, id, url }) =>
  read(scope, (tx) => openAttendance(tx, scope, id("session"), url.searchParams.get("guest")?.trim() ?? "")),
);

export const action = memberAction(async ({ scope, id, form }) => {
  const answer = await submitAttendance(scope, id("session"), form);
  const values = formValues(form);
  if ("errors" in answer) return data({ errors: answer.errors, values }, { status: 400 });
  if ("conflicts" in answer) return data({ conflicts: answer.conflicts, values }, { status: 409 });
  throw redirect(`/${scope.slug}/sessions/${id("session")}/attendance?saved`);
});

/** After a conflict the form's base is what is stored now, so that saving again is a choice. */
export const shouldRevalidate = ({ actionStatus, defaultShouldRevalidate }: ShouldRevalidateFunctionArgs) =>
  actionStatus === 409 || defaultShouldRevalidate;

export const meta = () => [{ title: "Attendance - Haleside" }];

type Refused = { errors?: FormErrors; values?: FormValues };
type Data = Route.ComponentProps["loaderData"];

function AthletesForm({ loaderData, refused }: { loaderData: Data; refused: Refused }) {
  const { athletes, base, fullTime, operationIds } = loaderData;
  const available = athletes.filter(({ state }) => state !== "unavailable").length;
  return (
    <Form {...refused} idPrefix="attendance">
      <input type="hidden" name="operationId" value={operationIds.attendance} />
      <input type="hidden" name="base" value={JSON.stringify(base)} />
      <Field
        name="fullTime"
        label="The session lasted"
        help="Full time for whoever has no minutes of their own."
      >
        <NumberInput size="large" unit="minutes" defaultValue={fullTime ?? ""} />
      </Field>
      <Button look="primary" size="large" wide name="intent" value="everyone">
        Everyone available, full time
      </Button>
      <p className="mt-2 text-soft">
        {countOf(available, "athlete")} without an entry get full time, or their own limit. The unavailable
        are left out.
      </p>
      <div className="mt-4">
        <AttendanceRows athletes={athletes} />
      </div>
      <div className="mt-6">
        <Button look="primary" size="large" wide name="intent" value="save">
          Save the attendance
        </Button>
      </div>
    </Form>
  );
}

function Guests({ loaderData }: { loaderData: Data }) {
  const { guests, guestName, operationIds } = loaderData;
  return (
    <Region heading="A visitor or a guest of another team">
      <PlainForm method="get" className="flex flex-wrap items-end gap-3">
        <label className="min-w-0 flex-1">
          <span className="mb-1 block font-medium">Name</span>
          <input
            type="search"
            name="guest"
            defaultValue={guestName}
            minLength={3}
            className={inputClasses("full", "large")}
          />
        </label>
        <Button size="large">Search</Button>
      </PlainForm>
      {guestName === "" ? null : guests.length === 0 ? (
        <p className="mt-3 text-soft">
          {guestName.length < 3
            ? "Type at least three letters of the name."
            : "Nobody else of that name. The athletic trainer can add a visitor to the roster."}
        </p>
      ) : (
        <ul className="mt-3">
          {guests.map(({ id, givenName, familyName }) => (
            <li key={id} className="border-0 border-b border-line py-2">
              <PlainForm method="post" className="flex items-center justify-between gap-3">
                <span>
                  {givenName} {familyName}
                </span>
                <input type="hidden" name="operationId" value={operationIds.guest} />
                <input type="hidden" name="athlete" value={id} />
                <Button size="large" name="intent" value="guest">
                  Add<span className="sr-only"> {`${givenName} ${familyName}`}</span>
                </Button>
              </PlainForm>
            </li>
          ))}
        </ul>
      )}
    </Region>
  );
}

function Headcount({ loaderData, refused }: { loaderData: Data; refused: Refused }) {
  const { session, headcountBase, fullTime, operationIds } = loaderData;
  if (session.exposureGrade === "recorded") return null;
  return (
    <Disclosure
      summary="Only the number is known"
      open={session.exposureGrade === "headcount" || refused.errors !== undefined}
    >
      <p className="mb-4 max-w-prose text-soft">
        The number is spread over the day's roster less the unavailable. Names are better: they show who was
        exposed.
      </p>
      <Form {...refused} idPrefix="headcount">
        <input type="hidden" name="operationId" value={operationIds.headcount} />
        <input type="hidden" name="base" value={JSON.stringify(headcountBase)} />
        <Field name="headcount" label="Athletes who took part">
          <NumberInput size="large" defaultValue={session.headcount ?? ""} />
        </Field>
        <Field name="minutes" label="Minutes">
          <NumberInput
            size="large"
            unit="minutes"
            defaultValue={session.headcountMinutes ?? fullTime ?? ""}
          />
        </Field>
        <Button look="primary" size="large" name="intent" value="headcount">
          Save the headcount
        </Button>
      </Form>
    </Disclosure>
  );
}

export default function Attendance({ loaderData, actionData }: Route.ComponentProps) {
  const { session, athletes, open } = loaderData;
  const values = actionData?.values;
  const conflicts = actionData && "conflicts" in actionData ? actionData.conflicts : undefined;
  const errors = actionData && "errors" in actionData ? actionData.errors : undefined;
  const ofHeadcount = values?.intent === "headcount";
  const refused: Refused = { ...(errors ? { errors } : {}), ...(values ? { values } : {}) };
  return (
    <Page width="text">
      <PageHeading
        above={
          <TextLink to="..">
            {sessionTitle(session)}, {session.teamName}
          </TextLink>
        }
        below={sessionMoment(session)}
      >
        Attendance
      </PageHeading>
      {conflicts ? <AttendanceConflict conflicts={conflicts} athletes={athletes} /> : null}
      {session.exposureGrade === "recorded" ? (
        <p className="mb-5">
          {countOf(session.tookPart, "athlete")} took part. Saved; change what was different and save again.
        </p>
      ) : null}
      {open ? (
        <>
          <AthletesForm loaderData={loaderData} refused={ofHeadcount ? {} : refused} />
          <Guests loaderData={loaderData} />
          <Headcount loaderData={loaderData} refused={ofHeadcount ? refused : {}} />
        </>
      ) : (
        <Note kind="info">
          {session.state === "cancelled"
            ? "This session is cancelled. If it took place after all, confirm it on its page first."
            : "This session has not come yet. Attendance is entered on its day."}
        </Note>
      )}
    </Page>
  );
}
