import { queryOptions } from "@tanstack/react-query";
import type { BodyOf } from "@shared/contract/endpoint";
import { deleteTerms, listTerms, putTerms } from "@shared/contract/catalogue-products";
import { call } from "@/lib/api-client";
import { versionHeaders } from "./version-headers";

/** A product's cost, regular price and tax by date, oldest first. */
export const termsQuery = (code: string) =>
  queryOptions({ queryKey: ["terms", code], queryFn: async ({ signal }) => (await call(listTerms, { params: { code }, signal })).items });

type Place = { code: string; validFrom: string; version: string | null };

export const saveTerms = ({ code, validFrom, version }: Place, body: BodyOf<typeof putTerms>) =>
  call(putTerms, { params: { code, validFrom }, body, headers: versionHeaders(version) });

export const removeTerms = ({ code, validFrom, version }: Place) =>
  call(deleteTerms, { params: { code, validFrom }, headers: versionHeaders(version) });
