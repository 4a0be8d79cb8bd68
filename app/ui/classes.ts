/** Joins class names, leaving out what is false or absent: `joinClasses("a", on && "b")`. */
export function joinClasses(...parts: (string | false | null | undefined)[]): string {
  return parts.filter(Boolean).join(" ");
}
