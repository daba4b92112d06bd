/** To the worker: one check. Checks are computed in the order they come. */
export interface VerificationRequest {
  readonly id: number;
  readonly key: string;
}

/** What a check gave in this browser. */
export interface BrowserOutcome {
  readonly measured: number | string;
  readonly gap: number;
  readonly digest: string;
  readonly seconds: number;
}

/** From the worker. */
export type VerificationResponse =
  | { readonly id: number; readonly state: 'begun' }
  | { readonly id: number; readonly state: 'done'; readonly outcome: BrowserOutcome }
  | { readonly id: number; readonly state: 'failed'; readonly message: string };
