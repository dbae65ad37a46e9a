import { type EventSubject, type EventType, newEvent } from "./objects";
import type { Changes } from "./store";

/** Tells of something that has happened; it leaves for the webhook address once the changes are kept. */
export function tell(changes: Changes, type: EventType, subject: EventSubject): void {
  const event = newEvent(type, subject, changes.seconds, changes.request);
  changes.put("events", event);
  changes.put("deliveries", {
    id: event.id,
    state: "pending",
    madeAt: changes.now,
    nextAt: changes.now,
    attempts: 0,
    lastError: null,
  });
}
