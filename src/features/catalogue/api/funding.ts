import { queryOptions } from "@tanstack/react-query";
import type { BodyOf } from "@shared/contract/endpoint";
import { createFunding, deleteFunding, listFunding, putFunding } from "@shared/contract/catalogue-funding";
import { call } from "@/lib/api-client";
import { versionHeaders } from "./version-headers";

/** What suppliers give for a product, by first day. */
export const fundingQuery = (product: string) =>
  queryOptions({ queryKey: ["funding", product], queryFn: async ({ signal }) => (await call(listFunding, { query: { product }, signal })).items });

type Place = { product: string; firstDay: string; version: string };

export const enterFunding = (body: BodyOf<typeof createFunding>) => call(createFunding, { body });

export const changeFunding = ({ product, firstDay, version }: Place, body: BodyOf<typeof putFunding>) =>
  call(putFunding, { params: { product, firstDay }, body, headers: versionHeaders(version) });

export const removeFunding = ({ product, firstDay, version }: Place) =>
  call(deleteFunding, { params: { product, firstDay }, headers: versionHeaders(version) });
