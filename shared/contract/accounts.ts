import { z } from "zod";
import { idParams, idSchema, timestampSchema } from "./common";
import { defineEndpoint } from "./endpoint";
import { permissionSchema, roleSchema } from "./permissions";

export const emailSchema = z.email("Give an e-mail address, for example ada@chain.example.").max(254);
export const passwordSchema = z
  .string()
  .min(12, "A password has at least 12 characters.")
  .max(200, "A password has at most 200 characters.");

export const sessionSchema = z.object({
  person: z.object({
    id: idSchema,
    email: z.string(),
    name: z.string(),
    roles: z.array(roleSchema),
    /** Codes of the categories a category manager decides on; "*" is every one. */
    categories: z.array(z.string()),
    mustChangePassword: z.boolean(),
  }),
  permissions: z.array(permissionSchema),
  /** How the caller proved who they are. */
  by: z.enum(["session", "token"]),
});
export type Session = z.infer<typeof sessionSchema>;

export const signInBody = z.object({ email: z.string().trim().min(1).max(254), password: z.string().min(1).max(200) });

export const signIn = defineEndpoint({
  method: "POST", path: "/api/session", summary: "Sign in", permission: "public", body: signInBody, response: sessionSchema,
});
export const getSession = defineEndpoint({
  method: "GET", path: "/api/session", summary: "Who is signed in", permission: "read", response: sessionSchema,
  beforePasswordChange: true,
});
export const signOut = defineEndpoint({
  method: "DELETE", path: "/api/session", summary: "Sign out", permission: "public",
});
export const changePassword = defineEndpoint({
  method: "PUT", path: "/api/session/password", summary: "Change one's own password", permission: "read",
  body: z.object({ current: z.string().min(1).max(200), next: passwordSchema }), beforePasswordChange: true,
});

export const tokenSchema = z.object({
  id: idSchema,
  name: z.string(),
  /** First characters, to tell tokens apart; the rest is never shown again. */
  prefix: z.string(),
  permissions: z.array(permissionSchema),
  createdAt: timestampSchema,
  expiresAt: timestampSchema,
  lastUsedAt: timestampSchema.nullable(),
  revokedAt: timestampSchema.nullable(),
});
export type Token = z.infer<typeof tokenSchema>;

export const createToken = defineEndpoint({
  method: "POST", path: "/api/tokens", summary: "Make an access token, for at most one's own rights; shown once", permission: "read",
  body: z.object({
    name: z.string().trim().min(1, "Name the token after the script that will use it.").max(80),
    permissions: z.array(permissionSchema).min(1, "Give the token at least one permission."),
    expiresInDays: z.number().int().min(1).max(366).default(90),
  }),
  response: tokenSchema.extend({ token: z.string() }), status: 201,
});
export const listTokens = defineEndpoint({
  method: "GET", path: "/api/tokens", summary: "One's own access tokens", permission: "read", response: z.object({ items: z.array(tokenSchema) }),
});
export const revokeToken = defineEndpoint({
  method: "DELETE", path: "/api/tokens/:id", summary: "Revoke a token: one's own, or anyone's for an administrator", permission: "read",
  params: idParams,
});
