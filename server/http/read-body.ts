import express, { type Request, type RequestHandler } from "express";
import type { Endpoint } from "@shared/contract/endpoint";
import { ProblemError } from "../errors";

/** A plan of 60,000 store-weeks fits; whoever has not signed in sends an address and a password. */
const signedInJson = express.json({ limit: "16mb", type: "application/json" });
const publicJson = express.json({ limit: "16kb", type: "application/json" });

/**
 * Steps that read an endpoint's body, after the permission check: JSON where it has one, nothing where it has none. A
 * multipart body is left to the feature, which streams it.
 */
export function readBody(endpoint: Endpoint): RequestHandler[] {
  if (!endpoint.body) return [];
  if (endpoint.multipart) return [requireContentType("multipart/form-data")];
  return [requireContentType("application/json"), endpoint.permission === "public" ? publicJson : signedInJson];
}

function requireContentType(type: string): RequestHandler {
  return (request, _response, next) => {
    if (!hasBody(request) || request.is(type)) {
      next();
      return;
    }
    next(
      new ProblemError({
        status: 415,
        code: "unsupported-content-type",
        detail: `Send the body as ${type}, and say so in Content-Type.`,
      }),
    );
  };
}

const hasBody = (request: Request) =>
  request.get("transfer-encoding") !== undefined || Number(request.get("content-length") ?? 0) > 0;
