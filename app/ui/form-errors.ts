import type { ZodError } from "zod";

/**
 * What a person has to put right: `form` for the whole, `fields` by the name of the input. An action answers with
 * it and status 400; `Form` shows it in the summary and beside the fields.
 */
export type FormErrors = { form?: string[]; fields: Record<string, string[]> };

/** What the person typed, by the name of the input, so that an answer with errors loses nothing. */
export type FormValues = Record<string, string | string[]>;

/**
 * Turns a zod error into `FormErrors`. A path such as `["contacts", 0, "phone"]` becomes the name
 * `contacts.0.phone`; an issue without a path belongs to the whole form. Equal messages are shown once.
 */
export function formErrorsFromZod(error: ZodError): FormErrors {
  const form = new Set<string>();
  const fields = new Map<string, Set<string>>();
  for (const { path, message } of error.issues) {
    const name = path.map(String).join(".");
    if (!name) {
      form.add(message);
      continue;
    }
    fields.set(name, (fields.get(name) ?? new Set()).add(message));
  }
  return {
    ...(form.size > 0 ? { form: [...form] } : {}),
    fields: Object.fromEntries([...fields].map(([name, messages]) => [name, [...messages]])),
  };
}

/** Fields that are never sent back to the page. */
const secretName = /password|passcode|token|secret|^code$/i;

/**
 * The text entries of a submitted form, to send back with its errors. Files cannot be sent back and secrets must
 * not be; a name given more than once becomes a list.
 */
export function formValues(data: FormData): FormValues {
  const values: FormValues = {};
  for (const name of new Set(data.keys())) {
    if (secretName.test(name)) continue;
    const texts = data.getAll(name).filter((entry) => typeof entry === "string");
    if (texts.length === 0) continue;
    values[name] = texts.length === 1 ? (texts[0] ?? "") : texts;
  }
  return values;
}

/** True when there is anything to put right. */
export function hasErrors(errors: FormErrors | null | undefined): errors is FormErrors {
  if (!errors) return false;
  return (errors.form?.length ?? 0) > 0 || Object.values(errors.fields).some((list) => list.length > 0);
}
