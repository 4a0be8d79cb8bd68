import "~/app.css";
import { hydrateRoot } from "react-dom/client";
import { BrowserRouter } from "react-router";
import { Gallery } from "./gallery";

const root = document.getElementById("root");
if (!root) throw new Error("The gallery's page has no root");
hydrateRoot(
  root,
  <BrowserRouter>
    <Gallery />
  </BrowserRouter>,
);
