import { useQuery } from "@tanstack/react-query";
import { useMemo, useState } from "react";
import type { ChainCalendar } from "@shared/calendar";
import type { Store } from "@shared/contract/catalogue";
import { exportTemperatures, type TemperatureWeek } from "@shared/contract/catalogue-temperatures";
import { DataTable } from "@/components/ui/data-table";
import type { TableColumn } from "@/components/ui/data-table-columns";
import { EmptyState } from "@/components/ui/empty-state";
import { PageHeader } from "@/components/ui/page-header";
import { QueryView } from "@/components/ui/query-view";
import { SelectField } from "@/components/ui/select-field";
import { Sheet } from "@/components/ui/sheet";
import { storesQuery } from "@/lib/catalogue";
import { useChainFormat, type ChainFormat } from "@/lib/format/chain-format";
import { toFahrenheit, type TemperatureUnit } from "@/lib/format/temperature";
import { usePermission } from "@/lib/session";
import { useFilters } from "@/lib/use-filters";
import { temperaturesQuery, type Place } from "../api/temperatures";
import { regionsOf } from "../view/regions";
import { differenceOf } from "../view/temperature-lines";
import { weeksOfYear, yearFrom } from "../view/year-weeks";
import { CatalogueActions } from "./catalogue-actions";
import { CatalogueViews } from "./catalogue-views";
import { RowButton } from "./row-button";
import { TemperatureChart } from "./temperature-chart";
import { TemperatureDialog } from "./temperature-dialog";
import { YearSteps } from "./year-steps";

type TemperaturesPageProps = { calendar: ChainCalendar; unit: TemperatureUnit; today: string };

/** Weekly mean temperatures by region and by store, against what is usual. */
export const TemperaturesPage = (props: TemperaturesPageProps) => {
  const query = useQuery(storesQuery());
  const mayWrite = usePermission("catalogue:write");
  return (
    <>
      <PageHeader
        title="Temperatures in the catalogue" heading="Catalogue" facts={["Weekly means, by region or for one store"]}
        actions={<CatalogueActions files={[{ label: "Temperatures", href: exportTemperatures.path, name: "temperatures.csv" }]} mayWrite={mayWrite} />}
      />
      <CatalogueViews />
      <QueryView
        query={query} loading="Reading the stores" failure="The stores could not be read" isEmpty={(stores) => stores.length === 0}
        empty={<Sheet><EmptyState title="There is no region yet">Regions come with the stores: enter those first.</EmptyState></Sheet>}
      >
        {(stores) => <PlaceTemperatures {...props} stores={stores} />}
      </QueryView>
    </>
  );
};

const placeFrom = (values: { region: string; store: string }, stores: readonly Store[]): Place =>
  values.store === "" ? { scope: "region", place: values.region || regionsOf(stores)[0] } : { scope: "store", place: values.store };

const PlaceTemperatures = ({ calendar, unit, today, stores }: TemperaturesPageProps & { stores: readonly Store[] }) => {
  const { values, set } = useFilters(["region", "store", "year"]);
  const place = placeFrom(values, stores);
  const year = yearFrom(values.year, calendar, today);
  const weeks = useMemo(() => weeksOfYear(calendar, year), [calendar, year]);
  const query = useQuery(temperaturesQuery({ ...place, first: weeks[0], last: weeks[weeks.length - 1] }));
  const region = place.scope === "region" ? place.place : (stores.find(({ code }) => code === place.place)?.region ?? "");
  return (
    <Sheet flush>
      <div className="grid items-end gap-3 border-b border-hairline p-4 sm:grid-cols-[14rem_18rem_auto] sm:px-5">
        <SelectField
          label="Region" value={region} onChange={(chosen) => set({ region: chosen, store: null })}
          choices={regionsOf(stores).map((each) => ({ value: each, label: each }))}
        />
        <SelectField
          label="Store" value={place.scope === "store" ? place.place : ""} onChange={(store) => set({ store, region })}
          choices={[{ value: "", label: "The region's own" }, ...stores.filter((store) => store.region === region).map(({ code, name }) => ({ value: code, label: `${code} ${name}` }))]}
        />
        <div className="flex h-9 items-center">
          <YearSteps year={year} onYear={(shown) => set({ year: String(shown) })} />
        </div>
      </div>
      <QueryView query={query} loading="Reading the temperatures" failure="The temperatures could not be read">
        {({ items }) => <YearOfWeeks place={place} year={year} unit={unit} weeks={items} />}
      </QueryView>
    </Sheet>
  );
};

type YearOfWeeksProps = { place: Place; year: number; unit: TemperatureUnit; weeks: readonly TemperatureWeek[] };

const YearOfWeeks = ({ place, year, unit, weeks }: YearOfWeeksProps) => {
  const format = useChainFormat();
  const mayWrite = usePermission("catalogue:write");
  const [open, setOpen] = useState<string | null>(null);
  const columns = columnsOf({ format, unit, scope: place.scope, mayWrite, open: setOpen });
  const chosen = weeks.find(({ week }) => week === open);
  return (
    <>
      <div className="p-4 sm:p-5"><TemperatureChart place={place.place} year={year} weeks={weeks} /></div>
      <div className="border-t border-hairline">
        <DataTable caption={`Temperatures of ${place.place} in ${year}`} rows={weeks} columns={columns} rowKey={({ week }) => week} maxHeight={520} />
      </div>
      {chosen && <TemperatureDialog place={place} week={chosen} unit={unit} isReadOnly={!mayWrite} onClose={() => setOpen(null)} />}
    </>
  );
};

type Columns = { format: ChainFormat; unit: TemperatureUnit; scope: Place["scope"]; mayWrite: boolean; open: (week: string) => void };

const columnsOf = ({ format, unit, scope, mayWrite, open }: Columns): TableColumn<TemperatureWeek>[] => {
  const perDegree = unit === "fahrenheit" ? 1.8 : 1;
  const degrees = (celsius: number | null) => (celsius === null ? "–" : `${format.number(unit === "fahrenheit" ? toFahrenheit(celsius) : celsius, { digits: 1 })}°`);
  return [
    {
      id: "week", header: "Week", value: ({ week }) => week,
      cell: ({ week }) => <>{format.week(week)} <span className="text-muted max-sm:hidden">· {format.weekDays(week)}</span></>,
    },
    {
      id: "mean", header: "Mean", align: "right", value: ({ temperatureC }) => temperatureC,
      cell: ({ week, temperatureC }) => <RowButton onPress={() => open(week)}>{temperatureC === null ? (mayWrite ? "Enter" : "–") : degrees(temperatureC)}</RowButton>,
    },
    {
      id: "usual", header: "Usual", meaning: "Mean of the other years at this time of year, smoothed over three weeks to either side.",
      align: "right", value: ({ normalC }) => normalC, cell: ({ normalC }) => degrees(normalC),
    },
    {
      id: "difference", header: "Difference", align: "right", value: differenceOf, from: "sm",
      cell: (row) => differenceCell(differenceOf(row), perDegree, format),
    },
    {
      id: "band", header: "Other years", align: "right", value: ({ lowC }) => lowC, from: "md", sortable: false,
      cell: ({ lowC, highC }) => (lowC === null ? "–" : `${degrees(lowC)} to ${degrees(highC)}`),
    },
    ...(scope === "store" ? [{ id: "source", header: "Measured for", value: ({ source }: TemperatureWeek) => (source === null ? null : source === "store" ? "the store" : "its region"), from: "sm" as const }] : []),
  ];
};

const differenceCell = (difference: number | null, perDegree: number, format: ChainFormat) =>
  difference === null ? "–" : `${format.number(difference * perDegree, { digits: 1, signed: true })}°`;
