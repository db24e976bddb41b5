import type { QueryClient } from "@tanstack/react-query";
import { TemperaturesPage } from "@/features/catalogue/components/temperatures-page";
import { ExtractsViews } from "@/features/extracts/components/extracts-views";
import { storesQuery } from "@/lib/catalogue";
import { useChain } from "@/lib/chain";
import { neutralSettings } from "@/lib/format/chain-format";
import { useChainCalendar } from "@/lib/use-chain-calendar";
import { useChainDay } from "@/lib/use-chain-day";

export const loaderFor = (queryClient: QueryClient) => () => {
  void queryClient.prefetchQuery(storesQuery());
  return null;
};

export const CatalogueTemperaturesRoute = () => {
  const calendar = useChainCalendar();
  const { temperatureUnit } = useChain() ?? neutralSettings;
  return (
    <>
      <ExtractsViews />
      <TemperaturesPage calendar={calendar} unit={temperatureUnit} today={useChainDay()} />
    </>
  );
};
