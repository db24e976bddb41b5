import type { BodyOf } from "@shared/contract/endpoint";
import { createStore, deleteStore, putStore } from "@shared/contract/catalogue-stores";
import { call } from "@/lib/api-client";
import { versionHeaders } from "./version-headers";

type Seen = { code: string; version: string };

export const enterStore = (body: BodyOf<typeof createStore>) => call(createStore, { body });

export const changeStore = ({ code, version }: Seen, body: BodyOf<typeof putStore>) =>
  call(putStore, { params: { code }, body, headers: versionHeaders(version) });

export const removeStore = ({ code, version }: Seen) => call(deleteStore, { params: { code }, headers: versionHeaders(version) });
