import { DescriptionList } from "~/ui";

type Props = { columns: { key: string; label: string; description: string; example: string }[] };

/** The columns an import knows, each with an example. */
export function ColumnDescriptions({ columns }: Props) {
  return (
    <DescriptionList
      items={columns.map(({ key, label, description, example }) => ({
        key,
        term: label,
        detail: (
          <>
            {description} <span className="text-soft">For example: {example}</span>
          </>
        ),
      }))}
    />
  );
}
