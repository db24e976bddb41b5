import { act, screen } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import type { createMemoryRouter } from "react-router-dom";
import { afterEach, describe, expect, it, vi } from "vitest";
import type { Session } from "@shared/contract/accounts";
import { Shell } from "@/app/shell/shell";
import { PersonMenu } from "@/features/accounts/components/person-menu";
import { createQueryClient } from "@/lib/query-client";
import { forgetOthersData, sessionQuery, signedOutKey, useSession } from "@/lib/session";
import { answerRequests } from "./support/answer";
import { renderInPage } from "./support/render";
import { renderRoutes } from "./support/routed";

afterEach(() => vi.unstubAllGlobals());

const person: Session["person"] = {
  id: "0b7e3a44-3b1b-4a8e-9a0a-000000000001",
  email: "ada@larkmoor.example",
  name: "Ada Kale",
  roles: ["planner"],
  categories: [],
  mustChangePassword: false,
};
const session: Session = { person, permissions: ["read"], by: "session" };

const Page = () => {
  const known = useSession();
  return known ? <PersonMenu person={known.person} onChangePassword={vi.fn()} onNotices={vi.fn()} /> : <p>Nobody is signed in.</p>;
};

/** A page inside what surrounds every page, as someone signed in sees it. */
const openPlan = () => {
  answerRequests((address, options) => {
    if (!address.includes("/api/session")) return { status: 404 };
    return options.method === "DELETE" ? { status: 204 } : { status: 200, body: session };
  });
  const queryClient = createQueryClient();
  queryClient.setQueryData(sessionQuery().queryKey, session);
  const routes = [
    { element: <Shell />, children: [{ path: "/scenarios/:id", element: <p>A plan</p> }] },
    { path: "/sign-in", element: <p>Who are you?</p> },
  ];
  const { router } = renderRoutes(routes, { at: "/scenarios/7?week=3", queryClient });
  return { queryClient, router };
};

const addressOf = ({ state }: ReturnType<typeof createMemoryRouter>) => `${state.location.pathname}${state.location.search}`;

describe("signing out", () => {
  it("tells the page at once and forgets what the person has read", async () => {
    answerRequests((_address, options) =>
      options.method === "DELETE" ? { status: 204 } : { status: 200, body: session },
    );
    const { queryClient } = renderInPage(<Page />);
    queryClient.setQueryData(["sales", "P1", "S1"], [1, 2, 3]);
    await userEvent.click(await screen.findByRole("button", { name: "AK: account of Ada Kale" }));
    await userEvent.click(screen.getByRole("menuitem", { name: "Sign out" }));
    expect(await screen.findByText("Nobody is signed in.")).toBeTruthy();
    expect(queryClient.getQueryData(["sales", "P1", "S1"])).toBeUndefined();
    expect(queryClient.getQueryData(sessionQuery().queryKey)).toBeNull();
  });

  it("leads to the plain sign-in page, so that the next person lands on their own first page", async () => {
    const { queryClient, router } = openPlan();
    await userEvent.click(screen.getByRole("button", { name: "AK: account of Ada Kale" }));
    await userEvent.click(screen.getByRole("menuitem", { name: "Sign out" }));
    expect(await screen.findByText("Who are you?")).toBeTruthy();
    expect(addressOf(router)).toBe("/sign-in");
    forgetOthersData(queryClient);
    expect(queryClient.getQueryData(signedOutKey)).toBeUndefined();
  });

  it("leads back to the page where the session merely ended", async () => {
    const { queryClient, router } = openPlan();
    act(() => void queryClient.setQueryData(sessionQuery().queryKey, null));
    expect(await screen.findByText("Who are you?")).toBeTruthy();
    expect(addressOf(router)).toBe(`/sign-in?returnTo=${encodeURIComponent("/scenarios/7?week=3")}`);
  });

  it("that the server did not hear of says that the person is still signed in", async () => {
    answerRequests((_address, options) => (options.method === "DELETE" ? "no answer" : { status: 200, body: session }));
    renderInPage(<Page />);
    await userEvent.click(await screen.findByRole("button", { name: "AK: account of Ada Kale" }));
    await userEvent.click(screen.getByRole("menuitem", { name: "Sign out" }));
    expect(await screen.findByText("You are still signed in: the server did not answer.")).toBeTruthy();
  });
});
