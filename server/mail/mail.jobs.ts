import { z } from "zod";
import { ProblemError } from "../errors";
import { defineJob, type JobDefinition } from "../jobs/job-queue";
import { OutboxMessageEntity } from "./outbox.entity";
import { sendMessage } from "./send-message";

/** From seconds to hours: a mail server that is away for a day loses nothing. */
const retryDelaysSeconds = [5, 30, 120, 600, 1_800, 3_600, 7_200, 14_400, 28_800, 43_200];

/** Sends one message of the outbox. Once it is marked as sent, running again does nothing. */
export const sendMailJob = defineJob({
  kind: "send-mail",
  payload: z.object({ messageId: z.number().int() }),
  retryLimit: retryDelaysSeconds.length,
  retryDelaysSeconds,
  async run({ payload, em, services, now }) {
    const message = await em.findOne(OutboxMessageEntity, { id: payload.messageId });
    if (!message || message.sentAt) return;
    message.attempts += 1;
    try {
      await sendMessage(message, services.environment);
    } catch (error) {
      message.lastError = (error instanceof Error ? error.message : String(error)).slice(0, 500);
      await em.flush();
      throw refusedForGood(error)
        ? new ProblemError({
            status: 422,
            code: "mail-refused",
            detail: "The mail server refuses this message for good.",
          })
        : error;
    }
    // A process killed between the server's yes and this flush sends the message again, under the same Message-ID.
    message.sentAt = now;
    message.lastError = null;
    await em.flush();
  },
});

/** SMTP answers of 500 and above are final; anything else may pass. */
function refusedForGood(error: unknown): boolean {
  return (
    error instanceof Error &&
    "responseCode" in error &&
    typeof error.responseCode === "number" &&
    error.responseCode >= 500
  );
}

export const mailJobs: readonly JobDefinition[] = [sendMailJob];
