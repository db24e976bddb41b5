import type { Response } from "express";
import type { Endpoint } from "@shared/contract/endpoint";
import type { SignedInCall } from "../../http/route";
import type { Actor } from "./load/load-extract.service";

/** Who a request comes from, as jobs and the audit trail keep it. */
export const actorOf = ({ caller, requestId }: Pick<SignedInCall<Endpoint>, "caller" | "requestId">): Actor =>
  ({ personId: caller.personId, tokenId: caller.tokenId, requestId });

/** Answers 202 with where the job can be watched. */
export function accepted(response: Response, jobId: string): { jobId: string } {
  response.location(`/api/jobs/${jobId}`);
  return { jobId };
}
