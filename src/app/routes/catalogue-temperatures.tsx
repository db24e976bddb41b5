import type { QueryClient } from "@tanstack/react-query";
import { useMemo } from "react";
import { parseWeekStart } from "@shared/calendar";
import { TemperaturesPage } from "@/features/catalogue/components/temperatures-page";
import { ExtractsViews } from "@/features/extracts/components/extracts-views";
import { storesQuery } from "@/lib/catalogue";
import { useChain } from "@/lib/chain";
import { neutralSettings } from "@/lib/format/chain-format";
import { useChainDay } from "@/lib/use-chain-day";

export const loaderFor = (queryClient: QueryClient) => () => {
  void queryClient.prefetchQuery(storesQuery());
  return null;
};

export const CatalogueTemperaturesRoute = () => {
  const { calendar: kind, weekStart, temperatureUnit } = useChain() ?? neutralSettings;
  const calendar = useMemo(() => ({ kind, weekStart: parseWeekStart(weekStart) }), [kind, weekStart]);
  return (
    <>
      <ExtractsViews />
      <TemperaturesPage calendar={calendar} unit={temperatureUnit} today={useChainDay()} />
    </>
  );
};
