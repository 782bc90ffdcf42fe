/// <reference types="astro/client" />

/** Put in by server/host.ts: whether this is `astro dev`. */
declare const WAKELINE_DEVELOPMENT: boolean;
/** Put in by server/host.ts: names of the migrations that the build was made with. */
declare const WAKELINE_MIGRATIONS: readonly string[];

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
