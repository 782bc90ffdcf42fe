/// <reference types="astro/client" />

/** Put in by server/host.ts: whether this is `astro dev`. */
declare const WAKELINE_DEVELOPMENT: boolean;

declare namespace App {
  interface Locals {
    requestId: string;
    actor: import('./domain/access/permissions').Actor | null;
    viewer: import('./server/auth/viewer').Viewer | null;
    sessionId: string | null;
    /** What the page opens beyond other pages. */
    doors?: import('./server/http/headers').Doors;
    /** Resolves when the reader has taken what was written; never put where nothing stands between. */
    drained?: () => Promise<void>;
    problem?: { status: number; title: string; message: string };
  }
}
