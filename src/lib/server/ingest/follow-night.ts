import { Refusal } from '$lib/domain/refusal';
import { actorOf } from '../auth/actor';
import type { Actor } from '../auth/permissions';
import { onNudge } from '../queue/nudge';
import { readNight } from './read-night';

/** At most twice a second a stream reads MariaDB; without a nudge it looks by itself, in case one was lost. */
const AT_MOST_EVERY_MS = 500;
const LOOK_ANYWAY_MS = 5_000;

const open = new Set<() => void>();

/** Ends every open stream, so that the server can close. */
export function endFollowing(): void {
  for (const end of open) end();
}

/**
 * A stream of whole night snapshots as server-sent events. The permission is asked again on each, so that a member who
 * is taken out of the programme sees no more.
 */
export async function followNight(
  actor: Actor,
  nightId: string,
  signal: AbortSignal,
): Promise<ReadableStream<Uint8Array>> {
  let snapshot = await readNight(actor, nightId);
  const encoder = new TextEncoder();
  let end = () => {};
  return new ReadableStream<Uint8Array>({
    start(controller) {
      let ended = false;
      let reading = false;
      let wanted = false;
      let sent = -1;
      const send = () => {
        if (snapshot.revision === sent) return void controller.enqueue(encoder.encode(': still here\n\n'));
        sent = snapshot.revision;
        controller.enqueue(encoder.encode(`id: ${sent}\nevent: night\ndata: ${JSON.stringify(snapshot)}\n\n`));
      };
      const look = async () => {
        if (ended) return;
        if (reading) {
          wanted = true;
          return;
        }
        reading = true;
        wanted = false;
        const started = Date.now();
        try {
          const now = await actorOf(actor.userId, actor.scopes);
          snapshot = await readNight(now, nightId);
          if (!ended) send();
        } catch (error) {
          if (error instanceof Refusal) return end();
          // The database may be away for a moment: the next look tells.
        } finally {
          const rest = Math.max(0, AT_MOST_EVERY_MS - (Date.now() - started));
          setTimeout(() => {
            reading = false;
            if (wanted) void look();
          }, rest);
        }
      };
      const endNudges = onNudge('nights', (id) => id === nightId && void look());
      const timer = setInterval(() => void look(), LOOK_ANYWAY_MS);
      end = () => {
        if (ended) return;
        ended = true;
        open.delete(end);
        clearInterval(timer);
        endNudges();
        try {
          controller.close();
        } catch {
          // the browser closed it first
        }
      };
      open.add(end);
      signal.addEventListener('abort', () => end());
      send();
    },
    cancel() {
      end();
    },
  });
}
