import type { QueryClient } from "@tanstack/react-query";
import { parseWeekStart } from "@shared/calendar";
import { eventsQuery } from "@/features/catalogue/api/events";
import { EventsPage } from "@/features/catalogue/components/events-page";
import { ExtractsViews } from "@/features/extracts/components/extracts-views";
import { storesQuery } from "@/lib/catalogue";
import { useChain } from "@/lib/chain";
import { neutralSettings } from "@/lib/format/chain-format";
import { useChainDay } from "@/lib/use-chain-day";
import { useMemo } from "react";

export const loaderFor = (queryClient: QueryClient) => () => {
  void queryClient.prefetchQuery(eventsQuery());
  void queryClient.prefetchQuery(storesQuery());
  return null;
};

export const CatalogueEventsRoute = () => {
  const { calendar: kind, weekStart } = useChain() ?? neutralSettings;
  const calendar = useMemo(() => ({ kind, weekStart: parseWeekStart(weekStart) }), [kind, weekStart]);
  return (
    <>
      <ExtractsViews />
      <EventsPage calendar={calendar} today={useChainDay()} />
    </>
  );
};
