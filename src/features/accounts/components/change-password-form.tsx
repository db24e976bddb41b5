import { zodResolver } from "@hookform/resolvers/zod";
import { useForm } from "react-hook-form";
import { z } from "zod";
import { passwordSchema } from "@shared/contract/accounts";
import { Button } from "@/components/ui/button";
import { Notice } from "@/components/ui/notice";
import { TextField } from "@/components/ui/text-field";
import { ApiError } from "@/lib/api-error";
import { useChangePassword } from "../api/change-password";

const formSchema = z
  .object({ current: z.string().min(1, "Type the password you have now."), next: passwordSchema, again: z.string() })
  .refine((fields) => fields.next === fields.again, { path: ["again"], message: "The two do not match." });
type PasswordFields = z.infer<typeof formSchema>;

const problemOf = (error: unknown) =>
  error instanceof ApiError ? error.detail : "The password was not changed. Try again.";

export const ChangePasswordForm = ({ onChanged }: { onChanged: () => void }) => {
  const change = useChangePassword();
  const form = useForm<PasswordFields>({
    resolver: zodResolver(formSchema),
    defaultValues: { current: "", next: "", again: "" },
  });
  const { errors } = form.formState;
  const submit = form.handleSubmit(({ current, next }) => change.mutate({ current, next }, { onSuccess: onChanged }));
  return (
    <form noValidate onSubmit={submit} className="flex flex-col gap-4">
      {change.isError && (
        <Notice tone="danger" role="alert">
          {problemOf(change.error)}
        </Notice>
      )}
      <TextField
        {...form.register("current")}
        label="Password now"
        type="password"
        autoComplete="current-password"
        error={errors.current?.message}
      />
      <TextField
        {...form.register("next")}
        label="New password"
        type="password"
        autoComplete="new-password"
        hint="At least 12 characters; a few words you will remember do well."
        error={errors.next?.message}
      />
      <TextField
        {...form.register("again")}
        label="New password again"
        type="password"
        autoComplete="new-password"
        error={errors.again?.message}
      />
      <Button type="submit" tone="primary" busy={change.isPending} className="mt-1 w-full">
        Change password
      </Button>
    </form>
  );
};
