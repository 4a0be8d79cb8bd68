export type TextBlock = { kind: "paragraph"; text: string } | { kind: "list"; items: string[] };

/** Typed text as paragraphs and lists: a line that begins with a dash is an item of a list. */
export function textBlocks(text: string): TextBlock[] {
  const blocks: TextBlock[] = [];
  for (const line of text.split(/\r?\n/).map((each) => each.trim())) {
    if (line === "") continue;
    const item = /^[-\u2013\u2022*]\s+(.*)$/.exec(line)?.[1];
    const last = blocks.at(-1);
    if (item === undefined) blocks.push({ kind: "paragraph", text: line });
    else if (last?.kind === "list") last.items.push(item);
    else blocks.push({ kind: "list", items: [item] });
  }
  return blocks;
}
