import { Readable } from "node:stream";
import { pipeline } from "node:stream/promises";
import type { Endpoint } from "@shared/contract/endpoint";
import { exportEvents } from "@shared/contract/catalogue-events";
import { exportFunding } from "@shared/contract/catalogue-funding";
import { exportListings } from "@shared/contract/catalogue-listings";
import { exportProducts } from "@shared/contract/catalogue-products";
import { exportStores } from "@shared/contract/catalogue-stores";
import { exportTemperatures } from "@shared/contract/catalogue-temperatures";
import { route, type Route } from "../../../http/route";
import type { ExportedKind } from "./export-files";
import { exportFile } from "./export.service";

const file = (endpoint: Endpoint<undefined, undefined, undefined, undefined>, kind: ExportedKind): Route =>
  route(endpoint, async ({ em, request, response }) => {
    response.attachment(`${kind}.csv`).type("text/csv; charset=utf-8");
    try {
      await pipeline(Readable.from(exportFile(em, kind)), response);
    } catch (error) {
      // Who asked for it has gone: that is no fault of ours.
      if (!request.destroyed) throw error;
    }
    return undefined;
  });

/** Before the routes of single things, so that "stores.csv" is no store's code. */
export const exportRoutes: readonly Route[] = [
  file(exportStores, "stores"), file(exportProducts, "products"), file(exportListings, "listings"),
  file(exportFunding, "funding"), file(exportEvents, "events"), file(exportTemperatures, "temperatures"),
];
