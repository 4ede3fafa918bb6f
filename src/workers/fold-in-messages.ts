import type { FoldInPlan, FoldInProblem } from '#domain/fold-in.ts';
import type { Milligrams } from '#domain/mass.ts';

export type ToWorker = { id: number; problem: FoldInProblem } | { cancel: number };

export type FromWorker =
  | { id: number; kind: 'progress'; bound: Milligrams; plan: FoldInPlan }
  | { id: number; kind: 'done'; plan: FoldInPlan }
  | { id: number; kind: 'failed'; message: string };
