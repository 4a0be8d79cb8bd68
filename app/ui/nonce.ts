import { createContext } from "react";

/** The nonce of this response's content security policy; empty in the browser, where the elements keep theirs. */
export const NonceContext = createContext<string | undefined>(undefined);
