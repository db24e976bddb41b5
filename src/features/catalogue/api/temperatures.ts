import { keepPreviousData, queryOptions } from "@tanstack/react-query";
import { deleteTemperature, listTemperatures, putTemperature } from "@shared/contract/catalogue-temperatures";
import { call } from "@/lib/api-client";
import { versionHeaders } from "./version-headers";

export type Place = { scope: "region" | "store"; place: string };

/** A place's temperatures over some weeks, with what is usual then. */
export const temperaturesQuery = ({ scope, place, first, last }: Place & { first: string; last: string }) =>
  queryOptions({
    queryKey: ["temperatures", scope, place, first, last],
    queryFn: ({ signal }) => call(listTemperatures, { params: { scope, place }, query: { first, last }, signal }),
    placeholderData: keepPreviousData,
  });

type At = Place & { week: string; version: string | null };

export const saveTemperature = ({ version, ...params }: At, temperatureC: number) =>
  call(putTemperature, { params, body: { temperatureC }, headers: versionHeaders(version) });

export const removeTemperature = ({ version, ...params }: At) => call(deleteTemperature, { params, headers: versionHeaders(version) });
