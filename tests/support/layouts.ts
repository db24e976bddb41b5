import request from "supertest";
import type { Extract, ExtractIssue } from "@shared/contract/extracts";
import type { Layout } from "@shared/contract/layouts";
import type { ExtractLayout, SavedLayout } from "@shared/contract/saved-layouts";
import { act, afterJob, checked, read, type ExtractsApp } from "./extracts";

/** A sales file as a German till system writes it: last days of weeks, semicolons, decimal commas. */
export const german = (...rows: string[]) => `${["Woche bis;Filiale;Artikel;Menge;Umsatz;Normalpreis", ...rows].join("\n")}\n`;
export const germanFile = german("31.05.2026;S1;P1;1.234,5;2.209,76;1,79", "31.05.2026;S2;P1;12;21,48;1,79");

type Named = Pick<Extract, "id">;
type Audited = { detail: Record<string, unknown>; subject_id: string };

/** What tests do with layouts, as a data admin, in the application that is there by then. */
export function layoutsIn(app: () => ExtractsApp) {
  const put = (path: string, body: object) => request(app().app).put(path).set("Authorization", app().dataAdmin).send(body);
  const layoutOf = async ({ id }: Named) => (await read(app(), `/api/extracts/${id}/layout`).expect(200)).body as ExtractLayout;
  return {
    put,
    layoutOf,
    issuesOf: async ({ id }: Named) => (await read(app(), `/api/extracts/${id}/issues`).expect(200)).body.items as ExtractIssue[],
    audited: async (action: string) =>
      (await app().services.pool.query<Audited>("select detail, subject_id from audit_entries where action = $1 order by id", [action])).rows,
    /** Has a file read by the layout in force or proposed for it, with changes, and checked again. */
    async confirmed({ id }: Named, { changes = {}, saveAs }: { changes?: Partial<Layout>; saveAs?: string } = {}): Promise<Extract> {
      const { layout } = await layoutOf({ id });
      return afterJob(app(), await put(`/api/extracts/${id}/layout`, { layout: { ...layout, ...changes }, saveAs }).expect(202));
    },
    load: async ({ id }: Named) => afterJob(app(), await act(app(), `/api/extracts/${id}/load`).send({ secondLook: true }).expect(202)),
    async savedAs(name: string, layout: Layout): Promise<SavedLayout> {
      const { body } = await act(app(), "/api/layouts").send({ name, layout }).expect(201);
      return body as SavedLayout;
    },
    germanLayout: async (): Promise<Layout> => (await layoutOf(await checked(app(), { file: germanFile }))).layout,
  };
}
