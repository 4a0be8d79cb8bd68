import type { ReactNode } from "react";
import { Route, Routes } from "react-router";
import { ChalkStatus, NavLinks, SkipLink, TopBar } from "~/ui";
import { Charts } from "./charts";
import { Figures } from "./figures";
import { Forms } from "./forms";
import { Words } from "./words";

function Frame({ children }: { children: ReactNode }) {
  return (
    <>
      <SkipLink />
      <TopBar
        name="Haleside"
        home="/"
        scope={
          <p>
            <a
              href="#club"
              className="font-medium text-on-bar underline decoration-dotted underline-offset-4"
            >
              Marram Bay Athletic
            </a>
            , season <strong>2026/27</strong>, all teams
          </p>
        }
        person="Ines Calloway, medical lead"
      />
      <NavLinks
        items={["Today", "Injuries", "Return to sport", "Rates", "Warm-ups", "Notices", "Reports"].map(
          (label) => ({
            label,
            to: label === "Rates" ? "/" : `/${label}`,
            end: true,
          }),
        )}
      />
      {children}
    </>
  );
}

/** Every part on four pages, with invented words, to look at. */
export function Gallery() {
  return (
    <Frame>
      <Routes>
        <Route path="/" element={<Figures />} />
        <Route path="/charts" element={<Charts />} />
        <Route
          path="/words"
          element={
            <>
              <ChalkStatus line="broken">
                No signal. 3 entries wait on this phone; nothing is lost.
              </ChalkStatus>
              <Words />
            </>
          }
        />
        <Route
          path="/forms"
          element={
            <>
              <ChalkStatus line="solid">All is saved.</ChalkStatus>
              <Forms />
            </>
          }
        />
      </Routes>
    </Frame>
  );
}
