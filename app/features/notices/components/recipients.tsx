import { formatDay } from "~/platform/days";
import { Checkbox, ChoiceButtons, Field, Fieldset, Note, TextArea, TextLink } from "~/ui";
import { relationWords } from "../../vocabulary";
import { PhoneLink } from "./notice-body";

export type ShownGuardian = {
  id: string;
  name: string;
  relation: string;
  phone: string | null;
  email: string | null;
  way: "email" | "phone" | "nobody";
  why: string | null;
  warning: "read" | "review" | null;
  limits: string | null;
  limitsReviewOn: string | null;
  already: { id: string; line: string } | null;
};

const relationOf = ({ relation }: ShownGuardian) => relationWords[relation] ?? relation;

/** Whom to phone, in order, and the record of the call. It stands before everything else where it is urgent. */
export function PhoneFirst({ guardians, urgent }: { guardians: ShownGuardian[]; urgent: boolean }) {
  const reachable = guardians.filter(({ way }) => way !== "nobody");
  return (
    <Fieldset
      legend={urgent ? "Phone first" : "Phone call"}
      help={
        urgent
          ? "Speak with a guardian before the child leaves. The e-mail only confirms what you said."
          : "Only if you phoned. The record says who was told what."
      }
    >
      <ol className="mb-5">
        {reachable.map((guardian, index) => (
          <li
            key={guardian.id}
            className="flex flex-wrap items-center gap-x-4 border-0 border-b border-line py-1"
          >
            <span>
              {index + 1}. {guardian.name}, {relationOf(guardian)}
            </span>
            {guardian.phone ? (
              <PhoneLink phone={guardian.phone} large={urgent} />
            ) : (
              <span className="text-soft">no number on file</span>
            )}
          </li>
        ))}
      </ol>
      <ChoiceButtons
        name="callGuardian"
        legend="Whom did you phone?"
        optional={!urgent}
        choices={reachable.map((guardian) => ({
          value: guardian.id,
          label: guardian.name,
          detail: relationOf(guardian),
        }))}
      />
      <CallFields optional={!urgent} />
    </Fieldset>
  );
}

/** What came of a call, and what was said. */
export function CallFields({ optional = false }: { optional?: boolean }) {
  return (
    <>
      <ChoiceButtons
        name="callOutcome"
        legend="Did you speak with them?"
        optional={optional}
        layout="segments"
        choices={[
          { value: "reached", label: "Yes, we spoke" },
          { value: "no_answer", label: "Nobody answered" },
        ]}
      />
      <Field
        name="callTold"
        label="What did you tell them?"
        help="In a sentence or two. It is kept sealed, with your name and the time."
        optional={optional}
      >
        <TextArea rows={3} />
      </Field>
    </>
  );
}

/** Who gets the notice, and who does not and why. The reasons are for the clinical roles alone. */
export function Recipients({ guardians, slug }: { guardians: ShownGuardian[]; slug: string }) {
  const offered = guardians.filter(({ way }) => way !== "nobody");
  const anyMail = offered.some(({ way }) => way === "email");
  const firstNew = offered.find(({ already }) => !already);
  return (
    <Fieldset
      legend="Who is told"
      help="Each guardian gets a message and a link of their own. Neither sees anything of the other."
    >
      {offered.map((guardian, index) => {
        const { id, name, way, email, why, already } = guardian;
        const where = way === "email" ? `by e-mail to ${email}` : "on the phone list";
        const label = already ? (
          <>
            Send again to {name}, {relationOf(guardian)}, {where}
            <span className="block text-soft">
              Told already: <TextLink to={`/${slug}/notices/${already.id}`}>{already.line}</TextLink>
            </span>
          </>
        ) : (
          <>
            {name}, {relationOf(guardian)}, {where}
          </>
        );
        return (
          <div key={id}>
            <Checkbox
              id={guardian === firstNew ? undefined : `field-tell-${index + 1}`}
              name={already ? "again" : "tell"}
              errors={guardian === firstNew ? undefined : []}
              value={id}
              defaultChecked={!already && (way === "email" || !anyMail)}
              label={label}
              help={way === "phone" ? why : undefined}
            />
            <LimitsNote guardian={guardian} />
          </div>
        );
      })}
      <NotTold guardians={guardians} />
    </Fieldset>
  );
}

/** Legal limits of somebody who may be told all the same: read before sending. */
function LimitsNote({ guardian }: { guardian: ShownGuardian }) {
  const { warning, limits, limitsReviewOn, name } = guardian;
  if (!warning) return null;
  return (
    <Note kind="attention" title={`Read the legal limits of ${name} before you send`}>
      <p>{limits}</p>
      {limitsReviewOn ? (
        <p>
          {warning === "review"
            ? `Their review was due on ${formatDay(limitsReviewOn)}: ask whether they still hold.`
            : `To be reviewed on ${formatDay(limitsReviewOn)}.`}
        </p>
      ) : null}
    </Note>
  );
}

export function NotTold({ guardians }: { guardians: ShownGuardian[] }) {
  const left = guardians.filter(({ way }) => way === "nobody");
  if (left.length === 0) return null;
  return (
    <>
      <h3 className="mt-4 mb-1 font-semibold">Not told</h3>
      <ul>
        {left.map((guardian) => (
          <li key={guardian.id} className="border-0 border-b border-line py-2">
            {guardian.name}, {relationOf(guardian)}
            <span className="block text-soft">
              {guardian.why}
              {guardian.limits ? ` On file: ${guardian.limits}` : ""}
            </span>
          </li>
        ))}
      </ul>
    </>
  );
}
