import { createContext } from "react-router";

export type RequestContext = {
  id: string;
  nonce: string;
  /** From the connection or a trusted proxy. */
  clientAddress: string;
  /** Told the matched route pattern, for the log. */
  notePattern: (pattern: string) => void;
};

/** What the Express server knows of a request. */
export const requestContext = createContext<RequestContext>();
