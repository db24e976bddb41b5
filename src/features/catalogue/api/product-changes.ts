import type { BodyOf } from "@shared/contract/endpoint";
import { createProduct, deleteProduct, putProduct } from "@shared/contract/catalogue-products";
import { call } from "@/lib/api-client";
import { versionHeaders } from "./version-headers";

type Seen = { code: string; version: string };

export const enterProduct = (body: BodyOf<typeof createProduct>) => call(createProduct, { body });

export const changeProduct = ({ code, version }: Seen, body: BodyOf<typeof putProduct>) =>
  call(putProduct, { params: { code }, body, headers: versionHeaders(version) });

export const removeProduct = ({ code, version }: Seen) => call(deleteProduct, { params: { code }, headers: versionHeaders(version) });
