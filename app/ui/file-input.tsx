import type { ComponentProps } from "react";
import { joinClasses } from "./classes";
import { useControl } from "./form-context";

type Props = Omit<ComponentProps<"input">, "type" | "size">;

/** A file from the device. The form around it needs `encType="multipart/form-data"`. */
export function FileInput({ className, ...rest }: Props) {
  const { attributes } = useControl(rest);
  return (
    <input
      type="file"
      {...rest}
      {...attributes}
      className={joinClasses(
        "block w-full max-w-[36rem] rounded-md border border-dashed border-edge bg-paper p-2 text-soft",
        "file:mr-4 file:min-h-target file:cursor-pointer file:rounded-md file:border file:border-solid file:border-edge",
        "file:bg-chalk file:px-4 file:font-medium file:text-ink aria-invalid:border-[3px] aria-invalid:border-berry",
        className,
      )}
    />
  );
}
