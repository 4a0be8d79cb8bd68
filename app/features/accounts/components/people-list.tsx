import { clinicalRoles, roleNames } from "~/features/accounts/permissions";
import { sentenceCase } from "~/features/vocabulary";
import { Button, ConfirmButton, Disclosure, Form } from "~/ui";
import { type Role, roles } from "~db/schema/codes";
import { TeamReach } from "./invite-form";

type Team = { id: string; name: string };
type Member = {
  personId: string;
  displayName: string;
  email: string;
  allTeams: boolean;
  roles: { role: string; confirmedAt: Date | null }[];
  teams: Team[];
};

const isWaiting = ({ role, confirmedAt }: { role: string; confirmedAt: Date | null }) =>
  clinicalRoles.includes(role as Role) && !confirmedAt;

function teamWords(allTeams: boolean, teams: Team[]) {
  if (allTeams) return "all teams";
  return teams.length > 0 ? teams.map(({ name }) => name).join(", ") : "no team";
}

/** One member: roles, teams, and what may be changed by whom. */
export function MemberItem(props: { member: Member; teams: Team[]; manages: boolean; confirms: boolean }) {
  const { member, teams, manages, confirms } = props;
  const waiting = member.roles.filter(isWaiting);
  const words = member.roles.map(
    (row) => roleNames[row.role as Role] + (isWaiting(row) ? " (not confirmed)" : ""),
  );
  return (
    <li className="border-0 border-b border-line py-3">
      <p className="font-medium">{member.displayName}</p>
      <p className="text-soft">
        {sentenceCase(words.join(", ") || "no role")}; {teamWords(member.allTeams, member.teams)}
      </p>
      <p className="break-words text-soft">{member.email}</p>
      {confirms && waiting.length > 0 ? (
        <Form className="mt-2">
          <input type="hidden" name="person" value={member.personId} />
          <p className="mb-2 max-w-prose">
            Confirm only somebody whose licence you have seen: this role opens clinical records.
          </p>
          <Button look="primary" name="intent" value="confirm">
            Confirm {waiting.map(({ role }) => roleNames[role as Role]).join(" and ")}
          </Button>
        </Form>
      ) : null}
      {manages ? <MemberChanges member={member} teams={teams} /> : null}
    </li>
  );
}

function MemberChanges({ member, teams }: { member: Member; teams: Team[] }) {
  const held = member.roles.map(({ role }) => role);
  return (
    <Disclosure summary="Change">
      <Form idPrefix={`teams-${member.personId}`}>
        <input type="hidden" name="person" value={member.personId} />
        <TeamReach
          teams={teams}
          reach={member.allTeams ? "all" : "listed"}
          listed={member.teams.map(({ id }) => id)}
        />
        <Button name="intent" value="teams">
          Save the teams
        </Button>
      </Form>
      <ul className="mt-5 flex flex-wrap gap-3 border-0">
        {roles.map((role) => (
          <li key={role}>
            <Form>
              <input type="hidden" name="person" value={member.personId} />
              <input type="hidden" name="role" value={role} />
              <Button name="intent" value={held.includes(role) ? "remove" : "grant"}>
                {held.includes(role) ? `Remove ${roleNames[role]}` : `Make ${roleNames[role]}`}
              </Button>
            </Form>
          </li>
        ))}
      </ul>
      <Form className="mt-4">
        <input type="hidden" name="person" value={member.personId} />
        <ConfirmButton
          label="End the membership"
          question={`End ${member.displayName}'s membership? Access is gone with the next page. Nothing recorded is lost.`}
          confirmLabel="End it"
          name="intent"
          value="end"
        />
      </Form>
    </Disclosure>
  );
}

type Invitation = {
  id: string;
  name: string;
  email: string;
  roles: string[];
  allTeams: boolean;
  teamIds: string[];
  expiresAt: Date;
  confirmedAt: Date | null;
};

export function OpenInvitation(props: {
  invitation: Invitation;
  teams: Team[];
  manages: boolean;
  confirms: boolean;
  timeZone: string;
}) {
  const { invitation, teams, manages, confirms, timeZone } = props;
  const clinical = invitation.roles.some((role) => clinicalRoles.includes(role as Role));
  const until = new Intl.DateTimeFormat("en-GB", { timeZone, dateStyle: "medium" }).format(
    invitation.expiresAt,
  );
  const listed = teams.filter(({ id }) => invitation.teamIds.includes(id));
  return (
    <li className="border-0 border-b border-line py-3">
      <p className="font-medium">{invitation.name}</p>
      <p className="text-soft">
        {sentenceCase(invitation.roles.map((role) => roleNames[role as Role]).join(", "))}
        {clinical && !invitation.confirmedAt ? " (not confirmed)" : ""};{" "}
        {teamWords(invitation.allTeams, listed)}
      </p>
      <p className="break-words text-soft">
        {invitation.email}, link works until {until}
      </p>
      <Form className="mt-2 flex flex-wrap gap-3">
        <input type="hidden" name="invitation" value={invitation.id} />
        {confirms && clinical && !invitation.confirmedAt ? (
          <Button look="primary" name="intent" value="confirm-invitation">
            Confirm the clinical role
          </Button>
        ) : null}
        {manages ? (
          <>
            <Button name="intent" value="resend">
              Send again
            </Button>
            <Button look="quiet" name="intent" value="revoke">
              Withdraw
            </Button>
          </>
        ) : null}
      </Form>
    </li>
  );
}
