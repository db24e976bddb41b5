import { useQuery } from "@tanstack/react-query";
import { useState } from "react";
import type { Extract } from "@shared/contract/extracts";
import type { UnknownCodes as Codes } from "@shared/contract/unknown-codes";
import { Button } from "@/components/ui/button";
import { Notice } from "@/components/ui/notice";
import { productsQuery, storesQuery } from "@/lib/catalogue";
import { countOf } from "@/lib/format/number";
import { usePermission } from "@/lib/session";
import { unknownCodesQuery, useEnterCodes } from "../../api/unknown-codes";
import { chosenCodes, entryOf, lacks } from "../../view/codes-to-enter";
import type { Entries } from "../../view/codes-to-enter";
import { problemSentence } from "../../view/problem-sentence";
import { CodeTable } from "./code-table";

/** Stores and products that the file names and the catalogue lacks, to be entered on the spot. */
export const UnknownCodes = ({ extract }: { extract: Extract }) => {
  const query = useQuery({ ...unknownCodesQuery(extract.id), enabled: extract.kind === "sales" });
  const mayEnter = usePermission("catalogue:write");
  const codes = query.data;
  if (!codes || codes.storesTotal + codes.productsTotal === 0) return null;
  return (
    <div className="border-b border-hairline p-4 sm:p-5">
      <h3 className="font-semibold">{unknownTitle(codes)}</h3>
      {mayEnter ? (
        <EnterCodes extractId={extract.id} codes={codes} />
      ) : (
        <p className="mt-1 text-muted">
          A data admin can enter them here, or with a stores or products file. Their rows stay out until then.
        </p>
      )}
    </div>
  );
};

const unknownTitle = ({ stores, storesTotal, products, productsTotal }: Codes): string => {
  const named = [
    storesTotal > 0 && countOf(storesTotal, "store"),
    productsTotal > 0 && countOf(productsTotal, "product"),
  ].filter((part) => part !== false);
  const one = storesTotal + productsTotal === 1;
  const rows = [...stores, ...products].reduce((sum, code) => sum + code.rows, 0);
  return `The file names ${named.join(" and ")} that the catalogue does not have; ${countOf(rows, "row")} ${rows === 1 ? "waits" : "wait"} for ${one ? "it" : "them"}`;
};

const EnterCodes = ({ extractId, codes }: { extractId: string; codes: Codes }) => {
  const [stores, setStores] = useState<Entries>({});
  const [products, setProducts] = useState<Entries>({});
  const [isAsked, setAsked] = useState(false);
  const regions = useQuery(storesQuery()).data?.map(({ region }) => region) ?? [];
  const categories = useQuery(productsQuery()).data?.map(({ category }) => category) ?? [];
  const enter = useEnterCodes(extractId);
  const chosenStores = chosenCodes(codes.stores, stores);
  const chosenProducts = chosenCodes(codes.products, products);
  const count = chosenStores.length + chosenProducts.length;
  const [lackStores, lackProducts] = [lacks(codes.stores, stores), lacks(codes.products, products)];
  const isWhole = lackStores.names + lackStores.details + lackProducts.names + lackProducts.details === 0;
  const submit = () => {
    setAsked(true);
    if (!isWhole || count === 0) return;
    enter.mutate({
      stores: chosenStores.map(({ code }) => {
        const { name, detail } = entryOf(stores, code);
        return { code, name, region: detail };
      }),
      products: chosenProducts.map(({ code }) => {
        const { name, detail } = entryOf(products, code);
        return { code, name, category: detail };
      }),
    });
  };
  return (
    <>
      <p className="mt-1 mb-4 text-muted">
        Look first whether a code is merely mistyped: then correct it where the file comes from. Name those that are really new, and
        enter them; the file is then checked again by itself.
      </p>
      <div className="flex flex-col gap-5">
        {codes.stores.length > 0 && (
          <CodeTable
            title="Stores" detail="Region" known={[...new Set(regions)]} codes={codes.stores} total={codes.storesTotal}
            entries={stores} onChange={setStores} showsLacks={isAsked}
          />
        )}
        {codes.products.length > 0 && (
          <CodeTable
            title="Products" detail="Category" known={[...new Set(categories)]} codes={codes.products} total={codes.productsTotal}
            entries={products} onChange={setProducts} showsLacks={isAsked}
          />
        )}
        {isAsked && !isWhole && (
          <Notice tone="danger" role="alert">
            Each needs a name, a store its region and a product its category: fill in the fields that are marked.
          </Notice>
        )}
        {enter.isError && (
          <Notice tone="danger" role="alert">
            {problemSentence(enter.error)}
          </Notice>
        )}
        <div>
          <Button onClick={submit} busy={enter.isPending} disabled={count === 0}>
            {count > 1 ? `Enter all ${count} and check again` : "Enter it and check again"}
          </Button>
        </div>
      </div>
    </>
  );
};
