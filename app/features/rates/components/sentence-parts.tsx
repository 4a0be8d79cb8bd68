import { Attention } from "~/ui";
import type { Part } from "../sentence";

/** An interval stays on one line; where a second stands beside it, the line may break between the two. */
function Interval({ text }: { text: string }) {
  const pieces = text.split(/(?<=[;,]) (?=allowing)/);
  return (
    <span className="text-soft">
      {pieces.map((piece, index) => (
        <span key={piece}>
          {index > 0 ? " " : ""}
          <span className={index === 0 ? "whitespace-nowrap" : undefined}>{piece}</span>
        </span>
      ))}
    </span>
  );
}

/** Sets a computed sentence in type. */
export function SentenceParts({ parts }: { parts: readonly Part[] }) {
  return parts.map(({ text, as }, index) => {
    const key = `${index} ${text}`;
    if (as === "strong") return <strong key={key}>{text}</strong>;
    if (as === "attention") return <Attention key={key}>{text}</Attention>;
    if (as === "interval") return <Interval key={key} text={text} />;
    return <span key={key}>{text}</span>;
  });
}
