import type { CatalogueEvent } from "@shared/contract/catalogue-events";
import type { Event } from "../catalogue.entities";
import { versionOf } from "../changes/versions";
import { eventValues } from "../describe";

export const versionOfEvent = (event: Event) => versionOf({ code: event.code, ...eventValues(event) });

export function presentEvent(event: Event): CatalogueEvent {
  const { id, code, name, firstDay, lastDay, region } = event;
  return { id, code, name, firstDay, lastDay, region: region === "" ? null : region, version: versionOfEvent(event) };
}
