import { z } from "zod";
import { NoticeTable } from "~/features/notices/components/notice-table";
import { listNotices, noticeFilters } from "~/features/notices/notices.server";
import { memberLoader } from "~/middleware/handlers.server";
import { ButtonLink, EmptyState, Lede, LinkRow, Page, PageHeading, TextLink } from "~/ui";
import type { Route } from "./+types/notices";

const showSchema = z.enum(noticeFilters).catch("all");

export const loader = memberLoader(async ({ scope, url }) => {
  const show = showSchema.parse(url.searchParams.get("show"));
  const kept = new URLSearchParams(url.search);
  kept.delete("show");
  return { ...(await listNotices(scope, url, show)), show, slug: scope.slug, kept: kept.toString() };
});

export const meta = () => [{ title: "Notices - Haleside" }];

const emptyWords = {
  all: "No notice was written in this time.",
  call: "Nobody waits for a call.",
  open: "Every notice is acknowledged, or its family was told by phone.",
};

export default function Notices({ loaderData }: Route.ComponentProps) {
  const { sentence, lines, counts, season, team, show, slug, kept } = loaderData;
  const filter = (name: typeof show, label: string) =>
    name === show ? (
      <span aria-current="true" className="inline-flex min-h-target items-center font-semibold">
        {label}
      </span>
    ) : (
      <TextLink to={{ search: name === "all" ? kept : `${kept}${kept ? "&" : ""}show=${name}` }}>
        {label}
      </TextLink>
    );
  return (
    <Page>
      <PageHeading>Notices</PageHeading>
      {counts.all === 0 ? (
        <EmptyState
          title="What families were told, and whether they have read it"
          actions={<ButtonLink to={`/${slug}/injuries`}>Open the injuries</ButtonLink>}
        >
          <p>
            A notice begins on an injury's page. From then on this page follows it until the family has heard.
          </p>
        </EmptyState>
      ) : (
        <>
          <Lede note={[season && `Season ${season}`, team ?? "all your teams"].filter(Boolean).join(", ")}>
            {sentence}
          </Lede>
          <LinkRow>
            {filter("all", `All (${counts.all})`)}
            {filter("call", `To phone (${counts.call})`)}
            {filter("open", `Not yet acknowledged (${counts.open})`)}
          </LinkRow>
          <NoticeTable notices={lines} slug={slug} empty={emptyWords[show]} />
        </>
      )}
    </Page>
  );
}
