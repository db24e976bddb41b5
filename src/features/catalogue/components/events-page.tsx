import { useQuery } from "@tanstack/react-query";
import { useMemo, useState } from "react";
import { addDays, firstDayOfWeek, type ChainCalendar } from "@shared/calendar";
import { exportEvents, type CatalogueEvent } from "@shared/contract/catalogue-events";
import { DataTable } from "@/components/ui/data-table";
import type { TableColumn } from "@/components/ui/data-table-columns";
import { EmptyState } from "@/components/ui/empty-state";
import { PageHeader } from "@/components/ui/page-header";
import { QueryView } from "@/components/ui/query-view";
import { SegmentedControl } from "@/components/ui/segmented-control";
import { Sheet } from "@/components/ui/sheet";
import { TextField } from "@/components/ui/text-field";
import { storesQuery } from "@/lib/catalogue";
import { useChainFormat, type ChainFormat } from "@/lib/format/chain-format";
import { countOf } from "@/lib/format/number";
import { usePermission } from "@/lib/session";
import { useFilters } from "@/lib/use-filters";
import { eventsQuery } from "../api/events";
import { regionsOf } from "../view/regions";
import { holdsWords } from "../view/search";
import { weeksOfYear, yearFrom } from "../view/year-weeks";
import { CatalogueActions } from "./catalogue-actions";
import { CatalogueViews } from "./catalogue-views";
import { KindHistory } from "./change-history";
import { EventCalendar } from "./event-calendar";
import { EventDialog } from "./event-dialog";
import { RowButton } from "./row-button";
import { YearSteps } from "./year-steps";

type EventsPageProps = { calendar: ChainCalendar; today: string };

const views = [{ value: "calendar", label: "Calendar" }, { value: "list", label: "List" }] as const;

/** The chain's events: over the weeks of a year, and as a list. */
export const EventsPage = ({ calendar, today }: EventsPageProps) => {
  const query = useQuery(eventsQuery());
  const stores = useQuery(storesQuery()).data ?? [];
  const mayWrite = usePermission("catalogue:write");
  const { values, set } = useFilters(["view", "year", "q"]);
  const [open, setOpen] = useState<{ id: number | null } | null>(null);
  const events = query.data ?? [];
  const regions = regionsOf(stores);
  const codes = [...new Set(events.map(({ code }) => code))].sort();
  const isList = values.view === "list";
  return (
    <>
      <PageHeader
        title="Events in the catalogue" heading="Catalogue"
        facts={query.data ? [countOf(codes.length, "event"), countOf(events.length, "occurrence")] : []}
        actions={<CatalogueActions files={[{ label: "Events", href: exportEvents.path, name: "events.csv" }]} mayWrite={mayWrite} enter={{ label: "Enter an event", onEnter: () => setOpen({ id: null }) }} />}
      />
      <CatalogueViews />
      <Sheet flush>
        <div className="flex flex-wrap items-end gap-3 border-b border-hairline p-4 sm:px-5">
          <SegmentedControl
            label="View" segments={views} value={isList ? "list" : "calendar"}
            onChange={(view) => set({ view: view === "list" ? view : null })}
          />
          {isList
            ? <TextField fieldClassName="min-w-56" type="search" label="Code or name" value={values.q} onChange={({ target }) => set({ q: target.value })} />
            : <YearSteps year={yearFrom(values.year, calendar, today)} onYear={(year) => set({ year: String(year) })} />}
        </div>
        <QueryView
          query={query} loading="Reading the events" failure="The events could not be read"
          isEmpty={(all) => all.length === 0 && isList}
          empty={
            <EmptyState title="There is no event yet">
              {mayWrite ? "Upload an events file under Files, or enter the first one by hand." : "Your data admin enters the events."}
            </EmptyState>
          }
        >
          {(all) => isList
            ? <EventTable events={all} words={values.q} onOpen={(id) => setOpen({ id })} />
            : <YearOfEvents calendar={calendar} today={today} year={yearFrom(values.year, calendar, today)} events={all} onOpen={(id) => setOpen({ id })} />}
        </QueryView>
      </Sheet>
      <KindHistory kind="event" />
      {open && (
        <EventDialog
          event={events.find(({ id }) => id === open.id) ?? null} codes={codes} regions={regions} isReadOnly={!mayWrite}
          onClose={() => setOpen(null)}
        />
      )}
    </>
  );
};

type YearOfEventsProps = EventsPageProps & { year: number; events: readonly CatalogueEvent[]; onOpen: (id: number) => void };

const YearOfEvents = ({ calendar, today, year, events, onOpen }: YearOfEventsProps) => {
  const weeks = useMemo(() => weeksOfYear(calendar, year), [calendar, year]);
  const last = addDays(weeks[weeks.length - 1], 6);
  const own = useMemo(() => events.filter(({ firstDay, lastDay }) => firstDay <= last && lastDay >= weeks[0]), [events, last, weeks]);
  return (
    <div className="p-4 sm:p-5">
      <p className="mb-3 text-muted">
        {countOf(weeks.length, "week")}, {own.length === 0 ? "no event" : countOf(own.length, "event")}. A dashed bar: held in one region only.
      </p>
      <EventCalendar weeks={weeks} events={own} thisWeek={firstDayOfWeek(today, calendar.weekStart)} onOpen={onOpen} />
    </div>
  );
};

const columnsOf = (format: ChainFormat, open: (id: number) => void): TableColumn<CatalogueEvent>[] => [
  { id: "firstDay", header: "First day", value: ({ firstDay }) => firstDay, cell: ({ firstDay }) => format.day(firstDay) },
  { id: "lastDay", header: "Last day", value: ({ lastDay }) => lastDay, cell: ({ lastDay }) => format.day(lastDay), from: "sm" },
  { id: "name", header: "Name", value: ({ name }) => name, cell: ({ id, name }) => <RowButton onPress={() => open(id)}>{name}</RowButton> },
  { id: "code", header: "Code", value: ({ code }) => code, from: "sm" },
  { id: "region", header: "Held in", value: ({ region }) => region ?? "The whole chain" },
];

const EventTable = ({ events, words, onOpen }: { events: readonly CatalogueEvent[]; words: string; onOpen: (id: number) => void }) => {
  const format = useChainFormat();
  const columns = columnsOf(format, onOpen);
  const shown = events.filter(({ code, name, region }) => holdsWords(words, [code, name, region]));
  if (shown.length === 0) return <EmptyState title="No event is like that">Change what is searched for above.</EmptyState>;
  return <DataTable caption="Events" rows={shown} columns={columns} rowKey={({ id }) => String(id)} initialSort={{ column: "firstDay", descending: true }} />;
};
