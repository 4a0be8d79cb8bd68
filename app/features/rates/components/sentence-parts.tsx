import { Attention } from "~/ui";
import type { Part } from "../sentence";

/** Sets a computed sentence in type. */
export function SentenceParts({ parts }: { parts: readonly Part[] }) {
  return parts.map(({ text, as }, index) => {
    const key = `${index} ${text}`;
    if (as === "strong") return <strong key={key}>{text}</strong>;
    if (as === "attention") return <Attention key={key}>{text}</Attention>;
    if (as === "interval")
      return (
        <span key={key} className="whitespace-nowrap text-soft">
          {text}
        </span>
      );
    return <span key={key}>{text}</span>;
  });
}
