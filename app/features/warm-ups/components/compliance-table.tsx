import { NoRate } from "~/ui";
import { type Column, DataTable } from "~/ui/data-table";
import type { Share } from "../compliance";
import type { TeamCompliance } from "../compliance.server";
import { cellWords, doseWords, percent, shareWords } from "../compliance-words";

function Figure({ figure, n }: { figure: string; n: string }) {
  return (
    <>
      <span className="block">{figure}</span>
      <span className="block text-sm text-soft">{n}</span>
    </>
  );
}

function ShareCell({ share, reason }: { share: Share; reason: string }) {
  const words = cellWords(share);
  return words ? <Figure {...words} /> : <NoRate reason={reason} />;
}

const columns: Column<TeamCompliance>[] = [
  { id: "team", header: "Team", rowHeader: true, value: (row) => row.teamName },
  {
    id: "recorded",
    header: "Session compliance, of recorded",
    numeric: true,
    value: (row) => row.compliance.ofRecorded.estimate?.estimate,
    cell: (row) => <ShareCell share={row.compliance.ofRecorded} reason="none recorded" />,
  },
  {
    id: "held",
    header: "Unrecorded as not done",
    numeric: true,
    value: (row) => row.compliance.ofHeld.estimate?.estimate,
    cell: (row) => <ShareCell share={row.compliance.ofHeld} reason="none held" />,
  },
  {
    id: "weekly",
    header: "Weekly dose",
    numeric: true,
    value: (row) => row.compliance.weeklyDose.estimate?.estimate,
    cell: ({ compliance: { weeklyDose } }) =>
      weeklyDose.estimate ? (
        <Figure
          figure={doseWords(weeklyDose.estimate)}
          n={`${weeklyDose.warmUps} in ${weeklyDose.teamWeeks} weeks`}
        />
      ) : (
        <NoRate reason="no week" />
      ),
  },
  {
    id: "completeness",
    header: "Completeness",
    numeric: true,
    value: (row) => row.compliance.completeness.estimate?.estimate,
    cell: ({ compliance: { completeness } }) =>
      completeness.estimate ? (
        <Figure figure={shareWords(completeness.estimate)} n={`${completeness.warmUps} warm-ups`} />
      ) : (
        <NoRate reason="no warm-up" />
      ),
  },
  {
    id: "athlete",
    header: "Athlete dose",
    numeric: true,
    value: (row) => row.compliance.athleteDose.estimate?.estimate,
    cell: (row) => <ShareCell share={row.compliance.athleteDose} reason="no attendance" />,
  },
  {
    id: "target",
    header: "Targets",
    value: (row) => row.targets.sessionShare,
    cell: ({ targets, assigned }) =>
      assigned ? (
        <span className="text-sm whitespace-nowrap text-soft">
          {percent(targets.sessionShare)} of sessions
          <br />
          {targets.perWeek} a week, {targets.minutes} min
        </span>
      ) : (
        <NoRate reason="no programme" />
      ),
  },
];

/** The four measures by team, each with its interval and its n. */
export function ComplianceTable({ teams }: { teams: TeamCompliance[] }) {
  return (
    <DataTable
      caption="Warm-ups by team: shares with their 95 % intervals and what they are of"
      columns={columns}
      rows={teams}
      rowKey={(row) => row.teamId}
      empty="No team in this view."
      defaultSort="team"
    />
  );
}
