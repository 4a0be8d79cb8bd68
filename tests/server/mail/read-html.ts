/** The words of an HTML part: the body without its tags, and what head and hidden preview say. */
export function readHtmlBody(html: string) {
  return html
    .replace(/<style[\s\S]*?<\/style>/gi, " ")
    .replace(/<!--[\s\S]*?-->/g, " ")
    .replace(/<[^>]+>/g, " ")
    .replace(/&quot;/g, '"')
    .replace(/&lt;/g, "<")
    .replace(/&gt;/g, ">")
    .replace(/&#x27;/g, "'")
    .replace(/&amp;/g, "&")
    .replace(/\s+/g, " ");
}

/** Every web address anywhere in an HTML part but its document type, each once, sorted. */
export function findWebAddresses(html: string) {
  const found = html.replace(/^<!DOCTYPE[^>]*>/i, "").match(/(?:https?:)?\/\/[^\s"'<>]+/g) ?? [];
  return [...new Set(found)].sort();
}
