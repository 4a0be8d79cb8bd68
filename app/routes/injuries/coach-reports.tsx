import { readQueue } from "~/features/injuries/coach-reports.server";
import { siteWords } from "~/features/injuries/summary";
import { sentenceCase } from "~/features/vocabulary";
import { memberLoader } from "~/middleware/handlers.server";
import { formatDay } from "~/platform/days";
import { Attention, EmptyState, Lede, Page, PageHeading, TextLink } from "~/ui";
import type { Route } from "./+types/coach-reports";

export const meta = () => [{ title: "Coaches' reports - Haleside" }];

export const loader = memberLoader(async ({ scope }) => ({
  reports: await readQueue(scope),
  base: `/${scope.slug}`,
}));

export default function CoachReports({ loaderData }: Route.ComponentProps) {
  const { reports, base } = loaderData;
  const urgent = reports.filter(({ urgency }) => urgency === "urgent").length;
  return (
    <Page width="text">
      <PageHeading above={<TextLink to={`${base}/injuries`}>Injuries</TextLink>}>
        Coaches' reports
      </PageHeading>
      {reports.length === 0 ? (
        <EmptyState title="No report is waiting">
          When no athletic trainer is there, a coach reports an injury from the phone. It stands here until it
          becomes an injury or is closed with a reason.
        </EmptyState>
      ) : (
        <>
          <Lede>
            <strong>{reports.length === 1 ? "One report waits" : `${reports.length} reports wait`}</strong>
            {urgent > 0 ? `, ${urgent === reports.length ? "" : `${urgent} of them `}urgent` : ""}. The oldest
            comes first.
          </Lede>
          <ul className="border-0 border-t border-line">
            {reports.map((report) => (
              <li key={report.id} className="border-0 border-b border-line py-3">
                <TextLink to={`${base}/coach-reports/${report.id}`}>
                  {report.athlete}, {siteWords(report.bodyArea, report.side)}
                </TextLink>
                <p className="text-soft">
                  {report.teamName ? `${report.teamName}, ` : ""}
                  {formatDay(report.onsetDay)}; sent at {report.reportedTime}
                  {report.reportedBy ? ` by ${report.reportedBy}` : ""}
                </p>
                {report.cautions.length > 0 ? (
                  <p>
                    <Attention>
                      {[...new Set(report.cautions.map(({ title }) => sentenceCase(title)))].join(". ")}
                    </Attention>
                  </p>
                ) : null}
              </li>
            ))}
          </ul>
        </>
      )}
    </Page>
  );
}
