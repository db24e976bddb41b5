import { zodResolver } from "@hookform/resolvers/zod";
import { useForm } from "react-hook-form";
import { z } from "zod";
import { Button } from "@/components/ui/button";
import { Notice } from "@/components/ui/notice";
import { TextField } from "@/components/ui/text-field";
import { useSignIn } from "../api/sign-in";
import { signInProblem } from "../view/sign-in-problem";

const formSchema = z.object({
  email: z.string().trim().min(1, "Type your e-mail address."),
  password: z.string().min(1, "Type your password."),
});
type SignInFields = z.infer<typeof formSchema>;

export const SignInForm = ({ onSignedIn }: { onSignedIn: () => void }) => {
  const signIn = useSignIn();
  const form = useForm<SignInFields>({ resolver: zodResolver(formSchema), defaultValues: { email: "", password: "" } });
  const { errors } = form.formState;
  const submit = form.handleSubmit((fields) =>
    signIn.mutate(fields, {
      onSuccess: onSignedIn,
      onError: () => {
        form.resetField("password");
        form.setFocus("password");
      },
    }),
  );
  return (
    <form noValidate onSubmit={submit} className="flex flex-col gap-4">
      {signIn.isError && (
        <Notice tone="danger" role="alert">
          {signInProblem(signIn.error)}
        </Notice>
      )}
      <TextField
        {...form.register("email")}
        label="E-mail address"
        type="email"
        autoComplete="username"
        autoFocus
        error={errors.email?.message}
      />
      <TextField
        {...form.register("password")}
        label="Password"
        type="password"
        autoComplete="current-password"
        error={errors.password?.message}
      />
      <Button type="submit" tone="primary" busy={signIn.isPending} className="mt-1 w-full">
        Sign in
      </Button>
    </form>
  );
};
