import { renderToString } from "react-dom/server";
import { StaticRouter } from "react-router";
import { Gallery } from "./gallery";

/** One page of the gallery as the server would send it. */
export function renderPage(path: string): string {
  return renderToString(
    <StaticRouter location={path}>
      <Gallery />
    </StaticRouter>,
  );
}
