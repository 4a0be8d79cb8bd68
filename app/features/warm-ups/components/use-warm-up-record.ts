import { useCallback, useEffect, useReducer, useRef, useState } from "react";
import type { OperationAnswer } from "~/features/sessions/sync";
import type { FieldConflict } from "~/platform/merge-fields";
import { choose, type Fields, inverseOf, openQueue, type Queue, settle, shownFields } from "../record-queue";
import type { WarmUpState } from "../warm-up";

type Event =
  | { type: "choose"; id: string; sessionId: string; chosen: Fields }
  | { type: "answers"; answers: readonly OperationAnswer[] }
  | { type: "decided" };

function reduce(queue: Queue, event: Event): Queue {
  if (event.type === "choose") return choose(queue, event.sessionId, event.id, event.chosen);
  if (event.type === "answers") return settle(queue, event.answers);
  return { ...queue, conflicts: [], refusal: null };
}

const retryMs = 4000;
const undoMs = 60_000;
const batch = 50;

type Trouble = "none" | "no-signal" | "signed-out";

/**
 * The record on this page: each tick shows at once and is sent under a client-made id; it waits here until the server
 * has it. A plain request, not a router fetcher: without signal a fetcher ends in the error page and the entry
 * would be lost with it.
 */
export function useWarmUpRecord(state: WarmUpState, sessionId: string, syncAddress: string) {
  const [queue, dispatch] = useReducer(reduce, state, openQueue);
  const [trouble, setTrouble] = useState<Trouble>("none");
  const [undo, setUndo] = useState<Fields | null>(null);
  const [savedHere, setSavedHere] = useState(false);
  const [attempt, setAttempt] = useState(0);
  const sending = useRef(false);
  const shown = shownFields(queue);
  const { waiting } = queue;

  const change = useCallback(
    (chosen: Fields) => dispatch({ type: "choose", id: crypto.randomUUID(), sessionId, chosen }),
    [sessionId],
  );

  // One request at a time, so that the server takes the operations in their order.
  // biome-ignore lint/correctness/useExhaustiveDependencies: `attempt` only starts another try
  useEffect(() => {
    if (waiting.length === 0 || sending.current) return;
    sending.current = true;
    send(syncAddress, waiting.slice(0, batch)).then((outcome) => {
      sending.current = false;
      if (typeof outcome === "string") {
        setTrouble(outcome);
        return;
      }
      setTrouble("none");
      setSavedHere(true);
      dispatch({ type: "answers", answers: outcome });
    });
  }, [waiting, attempt, syncAddress]);

  useEffect(() => {
    if (trouble === "none") return;
    const again = () => setAttempt((count) => count + 1);
    const timer = setInterval(again, retryMs);
    window.addEventListener("online", again);
    return () => {
      clearInterval(timer);
      window.removeEventListener("online", again);
    };
  }, [trouble]);

  useEffect(() => {
    if (waiting.length === 0) return;
    const warn = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener("beforeunload", warn);
    return () => window.removeEventListener("beforeunload", warn);
  }, [waiting.length]);

  useEffect(() => {
    if (!undo) return;
    const timer = setTimeout(() => setUndo(null), undoMs);
    return () => clearTimeout(timer);
  }, [undo]);

  return {
    shown,
    waitingCount: waiting.length,
    /** Something was sent from this page and the server has answered. */
    savedHere,
    trouble,
    conflicts: queue.conflicts,
    refusal: queue.refusal,
    change,
    /** A choice that can be taken back for a minute. */
    changeWithUndo: (chosen: Fields) => {
      setUndo(inverseOf(shown, chosen));
      change(chosen);
    },
    undo: undo
      ? () => {
          setUndo(null);
          change(undo);
        }
      : null,
    /** Both values were shown: keep this phone's, or leave what is stored. */
    decide: (conflicts: readonly FieldConflict[], mine: boolean) => {
      dispatch({ type: "decided" });
      if (mine) change(Object.fromEntries(conflicts.map(({ field, value }) => [field, value])));
    },
  };
}

/** The answers, or why there are none. What was not answered stays in the queue. */
async function send(
  address: string,
  operations: Queue["waiting"],
): Promise<readonly OperationAnswer[] | Exclude<Trouble, "none">> {
  try {
    const response = await fetch(address, {
      method: "POST",
      headers: { "Content-Type": "application/json" },
      body: JSON.stringify({ operations }),
    });
    if (response.status === 401) return "signed-out";
    if (response.ok) return ((await response.json()) as { answers: OperationAnswer[] }).answers;
    if (response.status >= 500 || response.status === 429) return "no-signal";
    const { title } = (await response.json()) as { title?: string };
    return operations.map(({ id }) => ({
      id,
      status: "refused",
      message: title ?? "This entry was refused.",
    }));
  } catch {
    return "no-signal";
  }
}
