import type { BodyOf } from "@shared/contract/endpoint";
import { putScenario } from "@shared/contract/scenarios";
import type { Scenario } from "@shared/contract/scenarios";
import { call } from "@/lib/api-client";

export type ScenarioSave = { id: string; version: number; draft: BodyOf<typeof putScenario> };

/** Saves over the version it was read at; refused with 412 where someone else saved meanwhile. */
export const saveScenario = ({ id, version, draft }: ScenarioSave): Promise<Scenario> =>
  call(putScenario, { params: { id }, body: draft, headers: { "If-Match": `"${version}"` } });
