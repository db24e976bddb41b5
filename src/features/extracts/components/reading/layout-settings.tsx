import type { Layout } from "@shared/contract/layouts";
import type { LayoutPreview } from "@shared/contract/saved-layouts";
import { SelectField } from "@/components/ui/select-field";
import { dateExample, numberExample, weekExample } from "../../view/layout-examples";
import { warningPlace } from "../../view/layout-mapping";
import type { WarningPlace } from "../../view/layout-mapping";
import { encodingWords, separatorWords } from "../../view/layout-words";
import type { Writing } from "./use-layout-draft";

type LayoutSettingsProps = {
  layout: Layout;
  preview: LayoutPreview;
  onWriting: (writing: Writing) => void;
  onPart: (part: Partial<Layout>) => void;
};

const choicesOf = <Value extends string>(words: Record<Value, string>) =>
  (Object.entries(words) as [Value, string][]).map(([value, label]) => ({ value, label }));

const encodings = choicesOf(encodingWords);
const separators = choicesOf(separatorWords);
const headers = choicesOf({ yes: "names the columns", no: "is a row of data already" });
const decimals = choicesOf({ ".": "a point: 1.5", ",": "a comma: 1,5" });
const thousands = [
  { value: "", label: "nothing: 1234" },
  { value: ",", label: "commas: 1,234" },
  { value: ".", label: "points: 1.234" },
  { value: " ", label: "blanks: 1 234" },
  { value: "'", label: "apostrophes: 1’234" },
] as const;
const dateOrders = choicesOf({ iso: "year, month, day", dmy: "day, month, year", mdy: "month, day, year" });
const weekDays = choicesOf({ first: "its first day", last: "its last day" });
const taxes = choicesOf({ included: "with tax", excluded: "without tax" });
const missings = choicesOf({ zero: "nothing was sold", unknown: "it is not known" });

/** How the file is written, in words, each with an example of its own. */
export const LayoutSettings = ({ layout, preview, onWriting, onPart }: LayoutSettingsProps) => {
  const { fileColumns } = preview;
  const said = (place: WarningPlace) => preview.warnings.filter(({ code }) => warningPlace(code) === place).map(({ message }) => message);
  const hint = (place: WarningPlace, example: string | null = null) => {
    const cautions = said(place);
    if (!example && cautions.length === 0) return undefined;
    return (
      <>
        {example && <span className="block">{example}</span>}
        {cautions.map((caution) => (
          <span key={caution} className="block text-caution">{caution}</span>
        ))}
      </>
    );
  };
  const isSales = layout.kind === "sales";
  return (
    <div className="grid gap-x-6 gap-y-5 sm:grid-cols-2 lg:grid-cols-4">
      <SelectField label="Letters are written in" choices={encodings} value={layout.encoding} onChange={(encoding) => onWriting({ encoding })} hint={hint("encoding")} />
      <SelectField label="Values are set apart by" choices={separators} value={layout.separator} onChange={(separator) => onWriting({ separator })} hint={hint("separator")} />
      <SelectField
        label="The first line" choices={headers} value={layout.hasHeader ? "yes" : "no"}
        onChange={(value) => onWriting({ hasHeader: value === "yes" })} hint={hint("header")}
      />
      <SelectField
        label="Lines above it to pass over" choices={linesChoices(layout.linesAbove)} value={String(layout.linesAbove)}
        onChange={(value) => onWriting({ linesAbove: Number(value) })}
      />
      <SelectField label="Decimals follow" choices={decimals} value={layout.decimal} onChange={(decimal) => onPart({ decimal })} hint={hint("numbers", numberExample(layout, fileColumns))} />
      <SelectField label="Thousands are set apart by" choices={thousands} value={layout.thousands} onChange={(sign) => onPart({ thousands: sign })} />
      <SelectField label="Days are written as" choices={dateOrders} value={layout.dateOrder} onChange={(dateOrder) => onPart({ dateOrder })} hint={hint("dates", dateExample(layout, fileColumns))} />
      {"week" in layout.mapping && (
        <SelectField label="A week is given by" choices={weekDays} value={layout.weekDay} onChange={(weekDay) => onPart({ weekDay })} hint={hint("weekDay", weekExample(layout, fileColumns))} />
      )}
      {isSales && (
        <>
          <SelectField label="Prices and net sales are" choices={taxes} value={layout.tax} onChange={(tax) => onPart({ tax })} hint={hint("tax", "Kept with tax; where the file has none it is added by each product’s rate.")} />
          <SelectField
            label="No row for a product means" choices={missings} value={layout.missingMeans} onChange={(missingMeans) => onPart({ missingMeans })}
            hint="In weeks in which the store has the product on its list."
          />
        </>
      )}
    </div>
  );
};

const mostLinesOffered = 10;

const linesChoices = (now: number) =>
  Array.from({ length: Math.max(mostLinesOffered, now) + 1 }, (_, lines) => ({
    value: String(lines), label: lines === 0 ? "none" : lines === 1 ? "1 line" : `${lines} lines`,
  }));
