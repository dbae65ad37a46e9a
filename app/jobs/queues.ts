/**
 * Every queue of the worker, with the limits of its jobs. Made by `npm run migrate`, because the application's
 * role may not create tables. Nothing that decides money rests on a queue alone: the reconciler looks it up.
 */
export type QueueName =
  | "check-scan"
  | "build-proofs"
  | "build-print-proofs"
  | "publish-proofs"
  | "settle-payment"
  | "end-hold"
  | "send-refund"
  | "send-email"
  | "lapse-offer";

type QueueLimits = {
  name: QueueName;
  options: { retryLimit: number; retryDelay: number; retryBackoff: boolean; expireInSeconds: number };
};

const quick = { retryLimit: 8, retryDelay: 2, retryBackoff: true, expireInSeconds: 60 };
const heavy = { retryLimit: 3, retryDelay: 5, retryBackoff: true, expireInSeconds: 600 };

export const QUEUES: QueueLimits[] = [
  { name: "check-scan", options: heavy },
  { name: "build-proofs", options: heavy },
  { name: "build-print-proofs", options: heavy },
  { name: "publish-proofs", options: quick },
  { name: "settle-payment", options: quick },
  { name: "end-hold", options: quick },
  { name: "send-refund", options: { ...quick, retryLimit: 12 } },
  { name: "send-email", options: { ...quick, retryLimit: 12 } },
  { name: "lapse-offer", options: quick },
];
