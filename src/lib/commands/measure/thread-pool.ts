import { Worker } from 'node:worker_threads';
import type { MeasureTask } from './measure-file';
import { problemLine, type MeasuredLine } from './measured-line';

interface Waiting {
  task: MeasureTask;
  resolve(lines: MeasuredLine[]): void;
}

/** Tasks given to a thread at once: the one it works on, and the next, so that it never waits for a message. */
const TASKS_A_THREAD = 2;

/** Threads that measure. A thread that dies (out of memory) costs its file, not the run. */
export class ThreadPool {
  private readonly threads: { worker: Worker; given: Waiting[] }[] = [];
  private readonly queue: Waiting[] = [];
  private readonly entry = new URL('./measure/measure-thread.js', import.meta.url);

  constructor(count: number) {
    for (let i = 0; i < count; i++) this.start();
  }

  /** Measures a task on a thread; its bytes are copied there. */
  run(task: MeasureTask): Promise<MeasuredLine[]> {
    return new Promise((resolve) => {
      this.queue.push({ task, resolve });
      this.deal();
    });
  }

  /** Ends all threads. */
  async close(): Promise<void> {
    await Promise.all(this.threads.map(({ worker }) => worker.terminate()));
  }

  private start(): void {
    const thread = { worker: new Worker(this.entry), given: [] as Waiting[] };
    this.threads.push(thread);
    thread.worker.on('message', ({ id, lines }: { id: number; lines: MeasuredLine[] }) => {
      const at = thread.given.findIndex(({ task }) => task.id === id);
      const [done] = thread.given.splice(at, 1);
      done.resolve(lines);
      this.deal();
    });
    thread.worker.on('error', (error) => {
      this.threads.splice(this.threads.indexOf(thread), 1);
      const [failed, ...rest] = thread.given;
      if (failed) failed.resolve([{ order: 0, ...deadThread(failed.task, error) }]);
      this.queue.unshift(...rest);
      this.start();
      this.deal();
    });
  }

  private deal(): void {
    for (const round of Array.from({ length: TASKS_A_THREAD }, (_, i) => i)) {
      for (const thread of this.threads) {
        if (this.queue.length === 0) return;
        if (thread.given.length > round) continue;
        const next = this.queue.shift()!;
        thread.given.push(next);
        thread.worker.postMessage(next.task);
      }
    }
  }
}

function deadThread(task: MeasureTask, error: Error) {
  return problemLine(task.source, {
    code: 'thread-died',
    what: `The thread that measured this file died (${error.message}).`,
    where: task.source,
    mend: 'Hand it in as several smaller files.',
  });
}
