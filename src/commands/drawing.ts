/**
 * Briefs drawn by several threads at once: a brief's charts take several times as long as its numbers, and none of them
 * waits for another.
 */
import { Worker } from 'node:worker_threads';
import type { BriefPage, Drawn, DrawTask } from './draw-worker.js';

export interface Drawing {
  /** The page as HTML. Throws an Error where the record can't be drawn. */
  readonly draw: (page: BriefPage) => Promise<string>;
  readonly close: () => Promise<void>;
}

interface Waiting {
  readonly resolve: (html: string) => void;
  readonly reject: (error: Error) => void;
}

interface Thread {
  readonly worker: Worker;
  /** What it has been asked to draw and has not drawn yet, by number. */
  readonly asked: Map<number, Waiting>;
}

/** A thread that can't work fails the pages that it was given. */
export function openDrawing(threads: number): Drawing {
  const all = Array.from({ length: threads }, openThread);
  let count = 0;
  return {
    draw: (page) =>
      new Promise((resolve, reject) => {
        const [{ worker, asked }] = [...all].sort((a, b) => a.asked.size - b.asked.size);
        const task: DrawTask = { id: count++, page };
        asked.set(task.id, { resolve, reject });
        worker.postMessage(task);
      }),
    close: async () => {
      await Promise.all(all.map(({ worker }) => worker.terminate()));
    },
  };
}

function openThread(): Thread {
  const worker = new Worker(new URL('./draw-worker.js', import.meta.url));
  const asked = new Map<number, Waiting>();
  worker.on('message', (drawn: Drawn) => {
    const waiting = asked.get(drawn.id);
    asked.delete(drawn.id);
    if ('html' in drawn) waiting?.resolve(drawn.html);
    else waiting?.reject(new Error(drawn.why));
  });
  worker.on('error', (error: Error) => {
    for (const { reject } of asked.values()) reject(error);
    asked.clear();
  });
  return { worker, asked };
}
