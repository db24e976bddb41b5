import type { EntityManager } from "@mikro-orm/postgresql";
import type { z } from "zod";
import type { Logger } from "../logger";
import type { Services } from "../services";

/** What a running job may use. */
export type JobContext<Payload> = {
  payload: Payload;
  jobId: string;
  /** The job's own unit of work. */
  em: EntityManager;
  services: Services;
  logger: Logger;
  now: Date;
  /** Fires when the job is cancelled, lost to another worker, or its process stops: long waits can end early. */
  signal: AbortSignal;
  /**
   * Tells people how far it is (written at most a few times a second, outside the job's transaction).
   * @throws JobCancelled where a person asked it to stop.
   */
  progress: (state: { done: number; total?: number | null; message?: string }) => Promise<void>;
};

/** Why a job was given up. */
export type JobFailure = { code: string; detail: string };

/** Tries after the first, where a kind does not say. */
export const defaultRetryLimit = 2;

/** A kind of background work: `run` is idempotent, since a killed worker's job is run again. */
export type JobDefinition<Schema extends z.ZodType = z.ZodType> = {
  kind: string;
  payload: Schema;
  /** Tries after the first that may break down before the job is given up. */
  retryLimit?: number;
  /** Seconds to wait before each of those tries; the last counts for all later ones. */
  retryDelaysSeconds?: readonly number[];
  run: (context: JobContext<z.output<Schema>>) => Promise<Record<string, unknown> | void>;
  /**
   * Called when no try is left, or the job was cancelled, to put the state of its subject right. It is called again
   * where it threw or its worker was killed meanwhile, so it must be idempotent.
   */
  onGivenUp?: (context: { payload: z.output<Schema>; services: Services; error: JobFailure }) => Promise<void>;
};

/** Keeps the payload's type for `run`. */
export function defineJob<Schema extends z.ZodType>(definition: JobDefinition<Schema>): JobDefinition<Schema> {
  return definition;
}

/** Thrown inside `run` by `progress` when a person has cancelled the job. */
export class JobCancelled extends Error {
  constructor() {
    super("The job was cancelled.");
    this.name = "JobCancelled";
  }
}

export type EnqueueOptions = {
  /** Person who asked for it. */
  personId?: string | null;
  /** Path where the outcome can be read. */
  subject?: string | null;
  /** At most one job with this key waits or runs at a time; a second request answers the first one's id. */
  singletonKey?: string;
};

export type JobQueue = {
  /** Adds a job inside the context's open transaction: both happen or neither. Returns the job's id. */
  enqueue: <Schema extends z.ZodType>(
    em: EntityManager,
    definition: JobDefinition<Schema>,
    payload: z.input<Schema>,
    options?: EnqueueOptions,
  ) => Promise<string>;
  /** Runs these kinds until `stop`. */
  work: (definitions: readonly JobDefinition[], services: Services) => Promise<void>;
  stop: () => Promise<void>;
};
