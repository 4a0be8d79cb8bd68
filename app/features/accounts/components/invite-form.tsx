import { roleNames } from "~/features/accounts/permissions";
import { choicesOf } from "~/features/vocabulary";
import {
  Button,
  ChoiceButtons,
  Field,
  Form,
  FormActions,
  type FormErrors,
  type FormValues,
  TextInput,
} from "~/ui";

type Props = {
  teams: { id: string; name: string }[];
  actionData: { errors: FormErrors; values: FormValues } | undefined;
};

const reachChoices = [
  { value: "all", label: "All teams" },
  { value: "listed", label: "Only these" },
];

/** All teams, now and later, or the listed ones. */
export function TeamReach({
  teams,
  reach,
  listed,
}: {
  teams: Props["teams"];
  reach?: string;
  listed?: string[];
}) {
  return (
    <>
      <ChoiceButtons
        name="reach"
        legend="For"
        layout="segments"
        choices={reachChoices}
        defaultValue={reach}
      />
      {teams.length > 0 ? (
        <ChoiceButtons
          name="teams"
          legend="Teams"
          mode="multiple"
          optional
          help="For “Only these”. Somebody who loses the last listed team has none."
          choices={teams.map(({ id, name }) => ({ value: id, label: name }))}
          defaultValue={listed}
        />
      ) : null}
    </>
  );
}

export function InviteForm({ teams, actionData }: Props) {
  return (
    <Form {...(actionData ?? {})} idPrefix="invite" summaryTitle="The invitation is not sent yet">
      <Field name="name" label="Name">
        <TextInput autoComplete="off" />
      </Field>
      <Field
        name="email"
        label="E-mail address"
        help="The link in the mail works for this address alone, for seven days."
      >
        <TextInput type="email" autoComplete="off" />
      </Field>
      <ChoiceButtons name="roles" legend="Role" mode="multiple" choices={choicesOf(roleNames)} />
      <TeamReach teams={teams} />
      <FormActions>
        <Button look="primary" name="intent" value="invite">
          Send the invitation
        </Button>
      </FormActions>
    </Form>
  );
}
