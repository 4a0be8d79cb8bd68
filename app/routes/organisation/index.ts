import { redirect } from "react-router";
import { memberLoader } from "~/middleware/handlers.server";

export const loader = memberLoader<never>(async ({ scope }) => {
  throw redirect(`/${scope.slug}/today`);
});
