import type { Actor } from '$lib/server/auth/permissions';

declare global {
  namespace App {
    interface Locals {
      actor: Actor | null;
      /** Present when the actor came by cookie. */
      sessionId: string | null;
      theme: 'light' | 'dark' | 'dome';
      requestId: string;
    }
    interface Error {
      message: string;
      /** Stands in the log beside the cause. */
      id?: string;
    }
  }
}

export {};
