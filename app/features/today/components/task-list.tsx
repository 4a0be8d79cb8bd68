import { TextLink } from "~/ui";
import { counted, type TaskGroup } from "../tasks";

/** What waits, group by group, each with the one step that mends it. */
export function TaskList({ groups }: { groups: TaskGroup[] }) {
  return (
    <>
      {groups.map(({ key, heading, tasks, more }) => (
        <section key={key} className="mt-6">
          <h3 className="text-base font-semibold">{heading}</h3>
          <ul className="border-0">
            {tasks.map((task) => (
              <li
                key={task.key}
                className="flex flex-wrap items-center justify-between gap-x-6 gap-y-1 border-0 border-b border-line py-2"
              >
                <span className="min-w-0 flex-1 basis-64">
                  <span className="font-medium">{task.words}</span>
                  {task.urgent ? <span className="font-medium text-berry">, urgent</span> : null}
                  {task.detail ? <span className="block text-soft">{task.detail}</span> : null}
                </span>
                <span className="flex flex-wrap gap-x-5">
                  {task.phone ? (
                    <a
                      href={`tel:${task.phone.replace(/[^\d+]/g, "")}`}
                      className="inline-flex min-h-target items-center text-lagoon underline underline-offset-4"
                    >
                      {task.phone}
                    </a>
                  ) : null}
                  <TextLink to={task.to} className="inline-flex min-h-target items-center">
                    {task.step}
                    <span className="sr-only">: {task.words}</span>
                  </TextLink>
                </span>
              </li>
            ))}
          </ul>
          {more ? (
            <p className="mt-2">
              <TextLink to={more.to} className="inline-flex min-h-target items-center">
                {counted(more.count, "more", "more")}
              </TextLink>
            </p>
          ) : null}
        </section>
      ))}
    </>
  );
}
