import type { RequestActor } from './actor.ts';

declare module 'express-serve-static-core' {
  interface Request {
    actor?: RequestActor | null;
  }
}
declare module 'express-session' {
  interface SessionData {
    userId: string;
    returnTo: string;
  }
}
