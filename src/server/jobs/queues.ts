/** Work that is done behind the answer to a request; each job names the shop and the operation that asked for it. */
export interface JobPayload {
  shopId: string;
  opId: string;
}

/** pg-boss's own schema: no shop's rows are in it, only their ids. */
export const JOBS_SCHEMA = 'pgboss';

/** Queues by name; a job waits half a year for a worker, and is tried again with growing pauses. */
export const queues = {
  /** A shift summary to the shop's managers by e-mail. */
  'shift-report': { policy: 'standard', retentionDays: 180, retryLimit: 10, retryDelay: 60, retryBackoff: true },
} as const;
export type QueueName = keyof typeof queues;
