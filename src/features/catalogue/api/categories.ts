import { queryOptions } from "@tanstack/react-query";
import { listCategories, putCategory } from "@shared/contract/catalogue-products";
import { call } from "@/lib/api-client";
import { versionHeaders } from "./version-headers";

export const categoriesQuery = () =>
  queryOptions({ queryKey: ["categories"], queryFn: async ({ signal }) => (await call(listCategories, { signal })).items });

export const nameCategory = ({ code, version }: { code: string; version: string }, name: string) =>
  call(putCategory, { params: { code }, body: { name }, headers: versionHeaders(version) });
