/// <reference types="astro/client" />

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
