import { notFound } from "~/platform/errors";

// PLACEHOLDER: replaced by the feature's own route.
export async function loader() {
  throw notFound();
}
