import { Fragment } from "react";
import { DescriptionList } from "~/ui";

export type EmergencyCardData = {
  name: string;
  address: string;
  access: string;
  defibrillator: string;
  emergencyNumbers: string;
};

const numberPattern = /\+?\d[\d ()-]+\d/g;

/** Telephone numbers in a text become links, so that a thumb reaches them. */
function Numbers({ text }: { text: string }) {
  const found = [...text.matchAll(numberPattern)];
  const after = (index: number) => {
    const match = found[index];
    return match ? match.index + match[0].length : 0;
  };
  return (
    <>
      {found.map((match, index) => (
        <Fragment key={match.index}>
          {text.slice(after(index - 1), match.index)}
          <a
            href={`tel:${match[0].replace(/[^\d+]/g, "")}`}
            className="inline-flex min-h-target-large items-center font-medium text-lagoon underline underline-offset-4"
          >
            {match[0]}
          </a>
        </Fragment>
      ))}
      {text.slice(after(found.length - 1))}
    </>
  );
}

/** The venue's emergency card: where help must come to, and whom to ring. */
export function EmergencyCard({ card }: { card: EmergencyCardData | null }) {
  if (!card)
    return (
      <p className="max-w-prose text-soft">
        This session names no venue, so there is no emergency card. Know the address and the nearest
        defibrillator before you begin.
      </p>
    );
  const missing = "not entered yet";
  return (
    <DescriptionList
      items={[
        {
          term: "Emergency numbers",
          detail: card.emergencyNumbers ? <Numbers text={card.emergencyNumbers} /> : missing,
        },
        { term: "Address", detail: `${card.name}${card.address ? `, ${card.address}` : ""}` },
        { term: "Access", detail: card.access || missing },
        { term: "Defibrillator", detail: card.defibrillator || missing },
      ]}
    />
  );
}
