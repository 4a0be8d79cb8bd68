import { useCallback, useEffect, useRef, useState } from "react";

const pauseBeforeKeeping = 900;

export type DraftState = { savedAt: string | null; state: "idle" | "keeping" | "kept" | "failed" };

/**
 * Keeps a form on the server while it is typed, after a short pause. `cancel` before submitting, so that no draft
 * follows the saved record.
 * @param action address that takes the form's fields and answers `{ savedAt: "HH:MM" | null }`
 * @param form name under which the draft is kept
 */
export function useDraft(action: string, form: string, savedAt: string | null) {
  const [draft, setDraft] = useState<DraftState>({ savedAt, state: "idle" });
  const timer = useRef<ReturnType<typeof setTimeout>>(undefined);
  const running = useRef<AbortController>(undefined);
  /** The form whose last words are not sent yet. */
  const waiting = useRef<HTMLFormElement | null>(null);

  const cancel = useCallback(() => {
    clearTimeout(timer.current);
    running.current?.abort();
    waiting.current = null;
  }, []);
  useEffect(() => cancel, [cancel]);

  useEffect(() => {
    // A phone that is locked or a page that is left within the pause: the last words go with a beacon.
    const flush = () => {
      if (!waiting.current) return;
      const body = new FormData(waiting.current);
      body.set("draft-form", form);
      waiting.current = null;
      navigator.sendBeacon(action, body);
    };
    window.addEventListener("pagehide", flush);
    return () => window.removeEventListener("pagehide", flush);
  }, [action, form]);

  const keep = useCallback(
    (element: HTMLFormElement) => {
      cancel();
      waiting.current = element;
      timer.current = setTimeout(async () => {
        waiting.current = null;
        const controller = new AbortController();
        running.current = controller;
        const body = new FormData(element);
        body.set("draft-form", form);
        setDraft((before) => ({ ...before, state: "keeping" }));
        try {
          const response = await fetch(action, { method: "POST", body, signal: controller.signal });
          if (!response.ok) throw new Error(`The draft was answered ${response.status}`);
          const { savedAt: at }: { savedAt: string | null } = await response.json();
          setDraft({ savedAt: at, state: "kept" });
        } catch {
          if (!controller.signal.aborted) setDraft((before) => ({ ...before, state: "failed" }));
        }
      }, pauseBeforeKeeping);
    },
    [action, form, cancel],
  );
  return { draft, keep, cancel };
}

/** The quiet line under the heading. */
export function draftWords({ savedAt, state }: DraftState): string | null {
  if (state === "failed")
    return "The draft is not kept: no connection. What you type stays on this page; save when the signal is back.";
  return savedAt ? `Draft kept at ${savedAt}` : null;
}
