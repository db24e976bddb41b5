import { screen, waitFor } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { afterEach, describe, expect, it, vi } from "vitest";
import { SignInForm } from "@/features/accounts/components/sign-in-form";
import { sessionQuery } from "@/lib/session";
import { answerRequests, refusal } from "./support/answer";
import { renderInPage } from "./support/render";

afterEach(() => vi.unstubAllGlobals());

const session = {
  person: {
    id: "0b7e3a44-3b1b-4a8e-9a0a-000000000001",
    email: "ada@larkmoor.example",
    name: "Ada Kale",
    roles: ["planner"],
    categories: [],
    mustChangePassword: false,
  },
  permissions: ["read"],
  by: "session",
};

const fillIn = async () => {
  await userEvent.type(screen.getByLabelText("E-mail address"), "ada@larkmoor.example");
  await userEvent.type(screen.getByLabelText("Password"), "a long password");
  await userEvent.click(screen.getByRole("button", { name: "Sign in" }));
};

describe("signing in", () => {
  it("sends both fields and knows the person afterwards", async () => {
    const onSignedIn = vi.fn();
    const asked = answerRequests(() => ({ status: 200, body: session }));
    const { queryClient } = renderInPage(<SignInForm onSignedIn={onSignedIn} />);
    await fillIn();
    await waitFor(() => expect(onSignedIn).toHaveBeenCalled());
    expect(JSON.parse(String(asked.mock.calls[0][1]?.body))).toEqual({
      email: "ada@larkmoor.example",
      password: "a long password",
    });
    expect(queryClient.getQueryData(sessionQuery().queryKey)).toMatchObject({ person: { name: "Ada Kale" } });
  });

  it("asks for what is missing before anything is sent", async () => {
    const asked = answerRequests(() => ({ status: 200, body: session }));
    renderInPage(<SignInForm onSignedIn={vi.fn()} />);
    await userEvent.click(screen.getByRole("button", { name: "Sign in" }));
    expect(await screen.findByText("Type your e-mail address.")).toBeTruthy();
    expect(screen.getByLabelText("Password").getAttribute("aria-invalid")).toBe("true");
    expect(asked).not.toHaveBeenCalled();
  });

  it("does not say which of the two was wrong, and empties the password", async () => {
    answerRequests(() => refusal(401, "No."));
    renderInPage(<SignInForm onSignedIn={vi.fn()} />);
    await fillIn();
    expect((await screen.findByRole("alert")).textContent).toBe("That e-mail address and password do not go together.");
    expect(screen.getByLabelText<HTMLInputElement>("Password").value).toBe("");
    expect(screen.getByLabelText<HTMLInputElement>("E-mail address").value).toBe("ada@larkmoor.example");
  });

  it("says how long to wait after too many attempts", async () => {
    answerRequests(() => ({ ...refusal(429, "Too many."), headers: { "retry-after": "120" } }));
    renderInPage(<SignInForm onSignedIn={vi.fn()} />);
    await fillIn();
    expect((await screen.findByRole("alert")).textContent).toBe("Too many attempts. Try again in 2 minutes.");
  });

  it("tells a server that is down from one that refuses", async () => {
    answerRequests(() => "no answer");
    renderInPage(<SignInForm onSignedIn={vi.fn()} />);
    await fillIn();
    expect((await screen.findByRole("alert")).textContent).toMatch(/did not answer/);
  });
});
