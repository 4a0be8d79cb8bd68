import { SpotMark, TextLink } from "~/ui";
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
    header: "Athlete",
    rowHeader: true,
    value: ({ athleteName }) => athleteName,
    cell: ({ id, athleteName, urgent }) => (
      <>
        <TextLink to={`/${slug}/notices/${id}`}>{athleteName}</TextLink>
        {urgent ? <span className="block text-sm font-semibold text-berry">urgent</span> : null}
      </>
    ),
  },
  {
    id: "guardian",
    header: "Guardian",
    value: ({ guardianName }) => guardianName,
    cell: ({ guardianName, relation }) => (
      <>
        {guardianName}
        <span className="block text-sm text-soft">{relationWords[relation] ?? relation}</span>
      </>
    ),
  },
  {
    id: "state",
    header: "Where it is",
    value: ({ state }) => state.at.getTime(),
    cell: ({ state }) => <SpotMark spot={state.spot}>{state.line}</SpotMark>,
  },
  {
    id: "call",
    header: "To phone",
    value: ({ state }) => state.phoneTask,
    cell: ({ state, guardianPhone }) =>
      state.phoneTask ? (
        <>
          <span className="block">{state.phoneTask}</span>
          {guardianPhone ? (
            <PhoneLink phone={guardianPhone} />
          ) : (
            <span className="text-soft">no number on file</span>
          )}
        </>
      ) : (
        <span className="text-soft">no</span>
      ),
  },
];

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
