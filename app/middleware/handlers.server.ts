import type { ActionFunctionArgs, LoaderFunctionArgs } from "react-router";
import { data } from "react-router";
import { ZodError, z } from "zod";
import type { MemberScope } from "~/features/accounts/scope.server";
import { DomainError, notFound } from "~/platform/errors";
import { formErrorsFromZod, formValues } from "~/ui/form-errors";
import { memberOf } from "./access";
import { asDomainError, errorResponse, problem } from "./error-response.server";

/** What a route of an organisation needs, and nothing more. */
export type MemberArgs = {
  scope: MemberScope;
  request: Request;
  url: URL;
  /** A path parameter that is a record's id; anything else answers like an absent record. */
  id: (name: string) => string;
  params: Readonly<Record<string, string | undefined>>;
};

const uuid = z.uuid();

function memberArgs({ context, request, params }: LoaderFunctionArgs | ActionFunctionArgs): MemberArgs {
  return {
    scope: memberOf(context),
    request,
    url: new URL(request.url),
    params,
    id: (name) => {
      const parsed = uuid.safeParse(params[name]);
      if (!parsed.success) throw notFound();
      return parsed.data;
    },
  };
}

/** A page's loader: guard (done by the middleware), parse, one call, response. Domain errors become statuses here. */
export function memberLoader<T>(run: (args: MemberArgs) => Promise<T>) {
  return async (args: LoaderFunctionArgs): Promise<T> => {
    try {
      return await run(memberArgs(args));
    } catch (error) {
      throw errorResponse(error);
    }
  };
}

/** What a refused form gets back: the errors, and everything the person typed. */
function refusal(error: unknown, form: FormData) {
  const values = formValues(form);
  if (error instanceof ZodError) return data({ errors: formErrorsFromZod(error), values }, { status: 400 });
  const fault = asDomainError(error);
  if (!fault || fault.code === "not_found" || fault.code === "forbidden") return undefined;
  const fields = fault.fields;
  const form_ = Object.keys(fields).length > 0 ? {} : { form: [fault.message] };
  return data({ errors: { ...form_, fields }, values }, { status: fault.status });
}

/** A form's fields. What is no form at all is the sender's fault, and answered as such. */
async function readForm(request: Request): Promise<FormData> {
  try {
    return await request.formData();
  } catch {
    throw errorResponse(
      new DomainError("unsupported", "This was not sent as a form. Go back and send it again."),
    );
  }
}

/**
 * A page's action. A zod error or a domain error comes back as `{ errors, values }` with its status, so that nothing
 * typed is lost; the page hands both to `Form`.
 */
export function memberAction<T>(run: (args: MemberArgs & { form: FormData }) => Promise<T>) {
  return async (args: ActionFunctionArgs) => {
    const form = await readForm(args.request);
    try {
      return await run({ ...memberArgs(args), form });
    } catch (error) {
      const answer = refusal(error, form);
      if (answer) return answer;
      throw errorResponse(error);
    }
  };
}

/** Errors of a form outside an organisation (sign-in, invitation), answered the same way. */
export async function answerForm<T>(request: Request, run: (form: FormData) => Promise<T>) {
  const form = await readForm(request);
  try {
    return await run(form);
  } catch (error) {
    const answer = refusal(error, form);
    if (answer) return answer;
    throw errorResponse(error);
  }
}

/** Answers about people are kept by no cache. */
const noStore = { headers: { "Cache-Control": "no-store" } };

/** A loader of the JSON API: problem details for errors. */
export function apiLoader(run: (args: MemberArgs) => Promise<unknown>) {
  return async (args: LoaderFunctionArgs): Promise<Response> => {
    try {
      const result = await run(memberArgs(args));
      return result instanceof Response ? result : Response.json(result, noStore);
    } catch (error) {
      return problem(error);
    }
  };
}

const maxBodyBytes = 1_000_000;

/** An action of the JSON API with a JSON body. */
export function apiAction<S extends z.ZodType>(
  schema: S,
  run: (args: MemberArgs & { body: z.output<S> }) => Promise<unknown>,
) {
  return async (args: ActionFunctionArgs): Promise<Response> => {
    try {
      const text = await args.request.text();
      if (text.length > maxBodyBytes) throw new DomainError("too_large", "Send at most 1 MB at once.");
      let json: unknown;
      try {
        json = JSON.parse(text);
      } catch {
        throw new DomainError("invalid", "The body is not JSON.");
      }
      const result = await run({ ...memberArgs(args), body: schema.parse(json) });
      return result instanceof Response ? result : Response.json(result, noStore);
    } catch (error) {
      return problem(error);
    }
  };
}
