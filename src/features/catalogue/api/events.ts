import { queryOptions } from "@tanstack/react-query";
import type { BodyOf } from "@shared/contract/endpoint";
import { createEvent, deleteEvent, listEvents, putEvent } from "@shared/contract/catalogue-events";
import { call } from "@/lib/api-client";
import { versionHeaders } from "./version-headers";

/** Every occurrence of the chain's events, by first day. */
export const eventsQuery = () =>
  queryOptions({ queryKey: ["events"], queryFn: async ({ signal }) => (await call(listEvents, { signal })).items });

type Seen = { id: number; version: string };

export const enterEvent = (body: BodyOf<typeof createEvent>) => call(createEvent, { body });

export const changeEvent = ({ id, version }: Seen, body: BodyOf<typeof putEvent>) =>
  call(putEvent, { params: { id }, body, headers: versionHeaders(version) });

export const removeEvent = ({ id, version }: Seen) => call(deleteEvent, { params: { id }, headers: versionHeaders(version) });
