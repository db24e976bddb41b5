import type { QueryClient } from "@tanstack/react-query";
import { eventsQuery } from "@/features/catalogue/api/events";
import { EventsPage } from "@/features/catalogue/components/events-page";
import { ExtractsViews } from "@/features/extracts/components/extracts-views";
import { storesQuery } from "@/lib/catalogue";
import { useChainCalendar } from "@/lib/use-chain-calendar";
import { useChainDay } from "@/lib/use-chain-day";

export const loaderFor = (queryClient: QueryClient) => () => {
  void queryClient.prefetchQuery(eventsQuery());
  void queryClient.prefetchQuery(storesQuery());
  return null;
};

export const CatalogueEventsRoute = () => {
  const calendar = useChainCalendar();
  return (
    <>
      <ExtractsViews />
      <EventsPage calendar={calendar} today={useChainDay()} />
    </>
  );
};
