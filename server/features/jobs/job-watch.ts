import { setTimeout as sleep } from "node:timers/promises";
import type { Services } from "../../services";
import type { JobRow } from "./jobs.entities";
import { findJobs } from "./jobs.repository";

const pollEveryMs = 300;
/** Who watches through one process at a time; more would keep it from answering anyone else. */
export const mostWatchers = 500;

const watches = new WeakMap<Services, JobWatch>();

/** The watch of a process, made when the first asks for it. */
export function watchOf(services: Services): JobWatch {
  const watch = watches.get(services) ?? new JobWatch(services);
  watches.set(services, watch);
  return watch;
}

/** Told how the job stands, at first and after each look; undefined where it is gone or cannot be read. */
export type JobListener = (job: JobRow | undefined) => void;

/**
 * Looks at the jobs that people watch through this process: one query each 0.3 s however many watch, and none while
 * nobody does. It keeps no state, so any process can take a watcher over.
 */
export class JobWatch {
  readonly #services: Services;
  readonly #listeners = new Map<string, Set<JobListener>>();
  #polling = false;

  constructor(services: Services) {
    this.#services = services;
  }

  get isFull(): boolean {
    let count = 0;
    for (const listeners of this.#listeners.values()) count += listeners.size;
    return count >= mostWatchers;
  }

  /** Begins to watch; the answer ends it. */
  watch(jobId: string, listener: JobListener): () => void {
    const listeners = this.#listeners.get(jobId) ?? new Set();
    this.#listeners.set(jobId, listeners.add(listener));
    void this.#poll();
    return () => {
      listeners.delete(listener);
      if (listeners.size === 0 && this.#listeners.get(jobId) === listeners) this.#listeners.delete(jobId);
    };
  }

  async #poll(): Promise<void> {
    if (this.#polling) return;
    this.#polling = true;
    while (this.#listeners.size > 0) {
      await this.#look();
      await sleep(pollEveryMs, undefined, { ref: false });
    }
    this.#polling = false;
  }

  async #look(): Promise<void> {
    const ids = [...this.#listeners.keys()];
    try {
      const jobs = await findJobs(this.#services.orm.em.fork(), ids);
      const byId = new Map(jobs.map((job) => [job.id, job]));
      for (const id of ids) for (const listener of this.#listeners.get(id) ?? []) listener(byId.get(id));
    } catch (error) {
      // The streams end, and the browsers come back in a moment.
      this.#services.logger.warn({ err: error }, "watched jobs could not be read");
      for (const id of ids) for (const listener of this.#listeners.get(id) ?? []) listener(undefined);
    }
  }
}
