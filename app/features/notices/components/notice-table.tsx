import { Attention, SpotMark, TextLink } from "~/ui";
import { type Column, DataTable } from "~/ui/data-table";
import { relationWords } from "../../vocabulary";
import type { NoticeState } from "../notice-state";
import { PhoneLink } from "./notice-body";

export type ShownNotice = {
  id: string;
  athleteName: string;
  guardianName: string;
  relation: string;
  guardianPhone: string | null;
  urgent: boolean;
  createdAt: Date;
  state: NoticeState;
};

const columnsFor = (slug: string): Column<ShownNotice>[] => [
  {
    id: "athlete",
    header: "About, and to",
    rowHeader: true,
    value: ({ athleteName }) => athleteName,
    cell: ({ id, athleteName, guardianName, relation, urgent }) => (
      <>
        <TextLink to={`/${slug}/notices/${id}`}>{athleteName}</TextLink>
        <span className="block text-sm text-soft">
          to {guardianName}, {relationWords[relation] ?? relation}
        </span>
        {urgent ? <span className="block text-sm font-semibold text-berry">urgent</span> : null}
      </>
    ),
  },
  {
    id: "state",
    header: "Where it is",
    value: ({ state }) => state.at.getTime(),
    cell: ({ state, guardianPhone }) => (
      <>
        <SpotMark spot={state.spot}>{state.line}</SpotMark>
        {state.phoneTask ? <CallNeeded task={state.phoneTask} phone={guardianPhone} /> : null}
      </>
    ),
  },
];

/** Why somebody should phone, and the number, under the state so that a phone shows it without scrolling. */
function CallNeeded({ task, phone }: { task: string; phone: string | null }) {
  return (
    <span className="mt-0.5 ml-8 flex flex-wrap items-center gap-x-3">
      <Attention>{task} Please phone:</Attention>
      {phone ? <PhoneLink phone={phone} /> : <span className="text-soft">no number on file</span>}
    </span>
  );
}

/** Notices with where each is and whom to phone. */
export function NoticeTable({
  notices,
  slug,
  empty,
}: {
  notices: ShownNotice[];
  slug: string;
  empty: string;
}) {
  return (
    <DataTable
      caption="Notices, newest first"
      captionHidden
      columns={columnsFor(slug)}
      rows={notices}
      rowKey={({ id }) => id}
      empty={empty}
      defaultSort="-state"
    />
  );
}
