import type { QueryClient } from "@tanstack/react-query";
import { createBrowserRouter, redirect } from "react-router-dom";
import { paths } from "@/lib/paths";
import { requireSession } from "./require-session";
import { RouteError } from "./route-error";
import { Shell } from "./shell/shell";
import { Starting } from "./starting";

/** Every page, loaded when first visited. A route module exports `Component` and, where it preloads, `loaderFor`. */
export const createRouter = (queryClient: QueryClient) =>
  createBrowserRouter([
    {
      path: paths.signIn.path,
      HydrateFallback: Starting,
      errorElement: <RouteError />,
      lazy: async () => ({ Component: (await import("./routes/sign-in")).SignInRoute }),
    },
    {
      element: <Shell />,
      HydrateFallback: Starting,
      errorElement: <RouteError />,
      loader: requireSession(queryClient),
      // The session is known once; pages that need it fresh invalidate its query.
      shouldRevalidate: () => false,
      children: [
        {
          errorElement: <RouteError inShell />,
          children: [
            {
              path: paths.home.path,
              lazy: async () => ({ loader: (await import("./routes/home")).loaderFor(queryClient), element: null }),
            },
            {
              path: paths.extracts.path,
              lazy: async () => {
                const page = await import("./routes/extracts");
                return { Component: page.ExtractsRoute, loader: page.loaderFor(queryClient) };
              },
            },
            {
              path: paths.coverage.path,
              lazy: async () => {
                const page = await import("./routes/extract-coverage");
                return { Component: page.ExtractCoverageRoute, loader: page.loaderFor(queryClient) };
              },
            },
            {
              path: paths.layouts.path,
              lazy: async () => {
                const page = await import("./routes/extract-layouts");
                return { Component: page.ExtractLayoutsRoute, loader: page.loaderFor(queryClient) };
              },
            },
            { path: paths.catalogue.path, loader: () => redirect(paths.catalogueStores.href()) },
            {
              path: paths.catalogueStores.path,
              lazy: async () => {
                const page = await import("./routes/catalogue-stores");
                return { Component: page.CatalogueStoresRoute, loader: page.loaderFor(queryClient) };
              },
            },
            {
              path: paths.catalogueProducts.path,
              lazy: async () => {
                const page = await import("./routes/catalogue-products");
                return { Component: page.CatalogueProductsRoute, loader: page.loaderFor(queryClient) };
              },
            },
            {
              path: paths.catalogueProduct.path,
              lazy: async () => {
                const page = await import("./routes/catalogue-product");
                return { Component: page.CatalogueProductRoute, loader: page.loaderFor(queryClient) };
              },
            },
            {
              path: paths.catalogueEvents.path,
              lazy: async () => {
                const page = await import("./routes/catalogue-events");
                return { Component: page.CatalogueEventsRoute, loader: page.loaderFor(queryClient) };
              },
            },
            {
              path: paths.catalogueTemperatures.path,
              lazy: async () => {
                const page = await import("./routes/catalogue-temperatures");
                return { Component: page.CatalogueTemperaturesRoute, loader: page.loaderFor(queryClient) };
              },
            },
            {
              path: paths.extract.path,
              lazy: async () => {
                const page = await import("./routes/extract");
                return { Component: page.ExtractRoute, loader: page.loaderFor(queryClient) };
              },
            },
            {
              path: paths.drivers.path,
              lazy: async () => {
                const page = await import("./routes/drivers");
                return { Component: page.DriversRoute, loader: page.loaderFor(queryClient) };
              },
            },
            {
              path: paths.stores.path,
              lazy: async () => {
                const page = await import("./routes/stores");
                return { Component: page.StoresRoute, loader: page.loaderFor(queryClient) };
              },
            },
            {
              path: paths.password.path,
              lazy: async () => ({ Component: (await import("./routes/password")).PasswordRoute }),
            },
            {
              path: paths.notices.path,
              lazy: async () => {
                const { NoticesRoute, loaderFor } = await import("./routes/notices");
                return { Component: NoticesRoute, loader: loaderFor(queryClient) };
              },
            },
            {
              path: paths.settings.path,
              lazy: async () => {
                const { SettingsRoute, loaderFor } = await import("./routes/settings");
                return { Component: SettingsRoute, loader: loaderFor(queryClient) };
              },
            },
            {
              path: paths.scenarios.path,
              lazy: async () => {
                const { ScenariosRoute, loaderFor } = await import("./routes/scenarios");
                return { Component: ScenariosRoute, loader: loaderFor(queryClient) };
              },
            },
            {
              path: paths.newScenario.path,
              lazy: async () => {
                const { NewScenarioRoute, loaderFor } = await import("./routes/new-scenario");
                return { Component: NewScenarioRoute, loader: loaderFor(queryClient) };
              },
            },
            {
              path: paths.scenario.path,
              lazy: async () => {
                const { ScenarioRoute, loaderFor } = await import("./routes/scenario");
                return { Component: ScenarioRoute, loader: loaderFor(queryClient) };
              },
            },
            {
              path: "*",
              lazy: async () => ({ Component: (await import("./routes/not-found")).NotFoundRoute }),
            },
          ],
        },
      ],
    },
  ]);
