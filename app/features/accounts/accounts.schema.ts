import { z } from "zod";
import { list } from "~/platform/form-fields";
import { roles } from "~db/schema/codes";

const email = z
  .string()
  .trim()
  .toLowerCase()
  .min(1, "Enter an e-mail address.")
  .max(254, "This e-mail address is too long.")
  .pipe(z.email("Enter an e-mail address, such as ines@example.org."));

const newPassword = z.string().min(1, "Enter a password.");

export const signInSchema = z.object({
  email,
  password: z.string().min(1, "Enter your password."),
  next: z.string().optional(),
});

export const forgotPasswordSchema = z.object({ email });

export const resetPasswordSchema = z.object({
  token: z.string().min(1, "This link is not complete. Ask for a new one."),
  password: newPassword,
});

export const acceptSchema = z.object({
  name: z.string().trim().min(1, "Enter your name.").max(120, "Use at most 120 characters."),
  password: newPassword,
});

export const changePasswordSchema = z.object({
  current: z.string().min(1, "Enter your current password."),
  password: newPassword,
});

const reach = {
  reach: z.enum(["all", "listed"], "Choose all teams or the listed ones."),
  teams: list(z.uuid()),
};
const someTeam = ({ reach, teams }: { reach: "all" | "listed"; teams: string[] }) =>
  reach === "all" || teams.length > 0;
const noTeam = { path: ["teams"], message: "Choose at least one team, or all teams." };

export const inviteSchema = z
  .object({
    email,
    name: z.string().trim().min(1, "Enter the person's name.").max(120, "Use at most 120 characters."),
    roles: list(z.enum(roles)).pipe(z.array(z.enum(roles)).min(1, "Choose at least one role.")),
    ...reach,
  })
  .refine(someTeam, noTeam);

/** Taking the last listed team away leaves none, so no refinement here. */
export const changeTeamsSchema = z.object(reach);

/** Form data as an object; a name given more than once becomes a list. */
export function formObject(form: FormData): Record<string, unknown> {
  return Object.fromEntries(
    [...new Set(form.keys())].map((name) => {
      const values = form.getAll(name);
      return [name, values.length === 1 ? values[0] : values];
    }),
  );
}
