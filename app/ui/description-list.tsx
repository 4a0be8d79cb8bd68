import type { ReactNode } from "react";

export type Description = { term: ReactNode; detail: ReactNode; key?: string };

/** Terms and details: beside each other on a desk, above each other on a phone. */
export function DescriptionList({ items }: { items: Description[] }) {
  return (
    <dl className="max-w-3xl">
      {items.map(({ term, detail, key }, index) => (
        <div
          key={key ?? (typeof term === "string" ? term : index)}
          className="border-b border-line py-2.5 sm:grid sm:grid-cols-[minmax(9rem,14rem)_1fr] sm:gap-6"
        >
          <dt className="text-soft">{term}</dt>
          <dd className="min-w-0">{detail}</dd>
        </div>
      ))}
    </dl>
  );
}
