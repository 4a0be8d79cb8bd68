/** One thing that waits for a person, in words, with the step that mends it. */
export type Task = {
  key: string;
  /** What waits. */
  words: string;
  /** Who, what, since when: a second, quieter line. */
  detail?: string;
  to: string;
  /** The step, as the words of the link. */
  step: string;
  urgent?: boolean;
  phone?: string;
};

export type TaskGroup = { key: string; heading: string; tasks: Task[]; more?: { count: number; to: string } };

const shownPerGroup = 5;

/** A group with its first tasks, urgent ones on top, and where the rest is; nothing when there is no task. */
export function groupOf(key: string, heading: string, tasks: Task[], allTo: string): TaskGroup[] {
  if (tasks.length === 0) return [];
  const sorted = [...tasks].sort((a, b) => Number(b.urgent ?? false) - Number(a.urgent ?? false));
  const rest = sorted.length - shownPerGroup;
  return [
    {
      key,
      heading,
      tasks: sorted.slice(0, shownPerGroup),
      ...(rest > 0 ? { more: { count: rest, to: allTo } } : {}),
    },
  ];
}

/** "3 athletes", "1 athlete": a count with its noun. */
export const counted = (count: number, one: string, many = `${one}s`) =>
  `${count} ${count === 1 ? one : many}`;

/** "a, b and c" */
export function joined(parts: readonly string[]): string {
  if (parts.length <= 1) return parts[0] ?? "";
  return `${parts.slice(0, -1).join(", ")} and ${parts.at(-1)}`;
}
