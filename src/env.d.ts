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
    problem?: { status: number; title: string; message: string };
  }
}
