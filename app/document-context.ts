import { createContext } from 'react';

/** What the server knows of the page it is rendering and no loader may have had the chance to say. */
export interface DocumentFacts {
  /** Lets the page's own inline scripts run. */
  nonce: string;
  theme: 'auto' | 'light' | 'night';
  /** The name under which faults of this request are logged. */
  faultReference: string | null;
}

/** Null in the browser, where the page itself holds the same facts. */
export const DocumentContext = createContext<DocumentFacts | null>(null);
