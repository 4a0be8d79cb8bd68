import type { ReactNode } from "react";
import { renderToStaticMarkup } from "react-dom/server";
import { createMemoryRouter, RouterProvider } from "react-router";
import { describe, expect, test } from "vitest";
import { z } from "zod";
import {
  Checkbox,
  ChoiceButtons,
  ConfirmButton,
  ErrorSummary,
  Field,
  Form,
  formErrorsFromZod,
  formValues,
  hasErrors,
  NumberInput,
  Select,
  TextInput,
} from "~/ui";
import { SearchSelect } from "~/ui/search-select";

const render = (node: ReactNode) =>
  renderToStaticMarkup(<RouterProvider router={createMemoryRouter([{ path: "/", element: node }])} />);

/** The opening tag that carries the id. */
const tagOf = (html: string, id: string) => new RegExp(`<[a-z]+[^>]* id="${id}"[^>]*>`).exec(html)?.[0] ?? "";

const errors = {
  form: ["Someone else saved first."],
  fields: { born: ["Write the year with four figures."] },
};

describe("Form with errors", () => {
  const html = render(
    <Form errors={errors} values={{ born: "27 3 14", name: "Nesta" }}>
      <Field name="name" label="Name">
        <TextInput defaultValue="from the record" />
      </Field>
      <Field name="born" label="Date of birth" help="Day, month, year.">
        <TextInput />
      </Field>
    </Form>,
  );

  test("posts, without the browser's own bubbles", () => {
    const form = /<form[^>]*>/.exec(html)?.[0];
    expect(form).toMatch(/method="post"/);
    expect(form).toMatch(/novalidate/i);
  });

  test("the summary comes first, takes the focus and links to the field with the same words", () => {
    expect(html.indexOf("Not saved yet: 2 things to put right")).toBeLessThan(html.indexOf("<label"));
    expect(html).toMatch(/<section tabindex="-1" autofocus/i);
    expect(html).toMatch(/<a href="#field-born"[^>]*>Write the year with four figures\.<\/a>/);
    expect(html.split("Write the year with four figures.").length - 1).toBe(2);
    expect(html).toContain("Someone else saved first.");
  });

  test("the field is described by its help and its error, in that order", () => {
    const input = tagOf(html, "field-born");
    expect(input).toContain('aria-describedby="field-born-help field-born-error"');
    expect(input).toContain('aria-invalid="true"');
    expect(tagOf(html, "field-born-help")).not.toBe("");
    expect(tagOf(html, "field-born-error")).not.toBe("");
    expect(html).toContain('for="field-born"');
  });

  test("a field without errors is not called invalid", () => {
    expect(tagOf(html, "field-name")).not.toContain("aria-invalid=");
  });

  test("what was typed comes back, over what the page started with", () => {
    expect(tagOf(html, "field-born")).toContain('value="27 3 14"');
    expect(tagOf(html, "field-name")).toContain('value="Nesta"');
  });
});

test("a form without errors has no summary", () => {
  expect(render(<Form>words</Form>)).not.toContain("<section");
  expect(renderToStaticMarkup(<ErrorSummary errors={{ fields: { name: [] } }} />)).toBe("");
});

test("an input outside a field and without a name is refused", () => {
  expect(() => renderToStaticMarkup(<TextInput />)).toThrow("needs a name");
});

test("two forms of one page keep their ids apart", () => {
  const html = render(
    <Form idPrefix="second" errors={{ fields: { name: ["Write a name."] } }}>
      <Field name="name" label="Name">
        <TextInput />
      </Field>
    </Form>,
  );
  expect(html).toContain('href="#second-name"');
  expect(tagOf(html, "second-name")).toContain('name="name"');
});

test("a number is text with a number keyboard, so that a wrong one can be shown back", () => {
  const html = render(
    <Form values={{ minutes: "forty" }}>
      <Field name="minutes" label="Minutes">
        <NumberInput unit="minutes" />
      </Field>
    </Form>,
  );
  expect(tagOf(html, "field-minutes")).toMatch(/type="text"/);
  expect(tagOf(html, "field-minutes")).toMatch(/inputmode="numeric"/i);
  expect(tagOf(html, "field-minutes")).toContain('value="forty"');
});

test("a list shows what was sent", () => {
  const html = render(
    <Form values={{ team: "2" }}>
      <Field name="team" label="Team">
        <Select
          defaultValue="1"
          options={[
            { value: "1", label: "One" },
            { label: "More", options: [{ value: "2", label: "Two" }] },
          ]}
        />
      </Field>
    </Form>,
  );
  expect(html).toMatch(/<option value="2" selected/);
  expect(html).not.toMatch(/<option value="1" selected/);
});

describe("ChoiceButtons", () => {
  const choices = [
    { value: "left", label: "Left" },
    { value: "right", label: "Right" },
    { value: "both", label: "Both" },
  ];

  test("single: radio buttons of one name, the chosen one checked, each with a label", () => {
    const html = render(<ChoiceButtons name="side" legend="Side" choices={choices} defaultValue="right" />);
    expect(html.split('type="radio"').length - 1).toBe(3);
    expect(html.split("checked").length - 1 - html.split("peer-checked").length + 1).toBe(1);
    expect(tagOf(html, "field-side-2")).toContain("checked");
    for (const id of ["field-side", "field-side-2", "field-side-3"]) expect(html).toContain(`for="${id}"`);
  });

  test("multiple: tick boxes, and every value that was sent is ticked again", () => {
    const html = render(
      <Form values={{ side: ["left", "both"] }}>
        <ChoiceButtons name="side" legend="Side" mode="multiple" choices={choices} defaultValue="right" />
      </Form>,
    );
    expect(tagOf(html, "field-side")).toContain('checked=""');
    expect(tagOf(html, "field-side-2")).not.toContain('checked=""');
    expect(tagOf(html, "field-side-3")).toContain('checked=""');
  });

  test("the summary's link reaches the first answer, and the group carries the error", () => {
    const html = render(
      <Form errors={{ fields: { side: ["Choose a side."] } }}>
        <ChoiceButtons name="side" legend="Side" choices={choices} />
      </Form>,
    );
    expect(html).toContain('href="#field-side"');
    expect(tagOf(html, "field-side")).toContain('type="radio"');
    expect(html).toMatch(/<fieldset aria-describedby="field-side-error"/);
  });
});

describe("Checkbox", () => {
  test("a box unticked by the person stays so when the form comes back", () => {
    const box = <Checkbox name="told" label="Told" defaultChecked />;
    expect(tagOf(render(box), "field-told")).toContain("checked");
    expect(tagOf(render(<Form values={{ name: "x" }}>{box}</Form>), "field-told")).not.toContain("checked");
    expect(tagOf(render(<Form values={{ told: "on" }}>{box}</Form>), "field-told")).toContain("checked");
  });
});

test("ConfirmButton needs two presses: the submitting one lies inside the closed question", () => {
  const html = render(
    <ConfirmButton label="End" question="It ends today." confirmLabel="End the membership" />,
  );
  expect(html).toMatch(/^<details(?! open)/);
  const [summary = "", inside = ""] = html.split("</summary>");
  expect(summary).not.toContain("<button");
  expect(inside).toMatch(/type="submit"[^>]*>End the membership/);
});

describe("SearchSelect without script", () => {
  const nothing = async () => [];

  test("is a text field with a button, and sends no id that nobody chose", () => {
    const html = render(
      <Field name="athlete" label="Athlete">
        <SearchSelect load={nothing} />
      </Field>,
    );
    expect(tagOf(html, "field-athlete")).toContain('name="athlete-text"');
    const button = /<button[^>]*>/.exec(html)?.[0];
    expect(button).toContain('name="find"');
    expect(button).toContain('value="athlete"');
    expect(button).toContain('type="submit"');
    expect(html).not.toMatch(/name="athlete"/);
  });

  test("offers what was found, told apart by its detail", () => {
    const html = render(
      <Form values={{ "athlete-text": "Tova" }}>
        <Field name="athlete" label="Athlete">
          <SearchSelect
            load={nothing}
            matches={[
              { id: "1", label: "Tova Inchmere", detail: "girls under 16" },
              { id: "2", label: "Tova Inchmere", detail: "girls under 14" },
            ]}
          />
        </Field>
      </Form>,
    );
    expect(tagOf(html, "field-athlete")).toContain('value="Tova"');
    expect(html.split('type="radio"').length - 1).toBe(2);
    expect(html).toContain("girls under 14");
    expect(html).not.toContain("checked");
  });

  test("keeps the one that is chosen", () => {
    const html = render(
      <Field name="athlete" label="Athlete">
        <SearchSelect load={nothing} defaultOption={{ id: "7", label: "Runa Penhallow" }} />
      </Field>,
    );
    expect(html).toMatch(
      /<input type="radio"[^>]*name="athlete"[^>]*value="7"|name="athlete"[^>]*checked=""[^>]*value="7"/,
    );
    expect(tagOf(html, "field-athlete")).toContain('value="Runa Penhallow"');
  });
});

describe("form errors", () => {
  const schema = z
    .object({
      name: z.string().min(2, "Write a name."),
      contacts: z.array(z.object({ phone: z.string().min(5, "Too short.") })),
    })
    .refine((value) => value.name !== "all", "Not everyone at once.");

  test("go by the path of the field, and to the form without one", () => {
    const field = schema.safeParse({ name: "", contacts: [{ phone: "12345" }, { phone: "1" }] });
    expect(formErrorsFromZod(field.error ?? new z.ZodError([]))).toEqual({
      fields: { name: ["Write a name."], "contacts.1.phone": ["Too short."] },
    });
    const whole = schema.safeParse({ name: "all", contacts: [] });
    expect(formErrorsFromZod(whole.error ?? new z.ZodError([]))).toEqual({
      form: ["Not everyone at once."],
      fields: {},
    });
  });

  test("are none when every list is empty", () => {
    expect(hasErrors({ fields: { name: [] } })).toBe(false);
    expect(hasErrors(null)).toBe(false);
    expect(hasErrors({ form: ["x"], fields: {} })).toBe(true);
  });

  test("come with what was typed, but never a secret or a file", () => {
    const data = new FormData();
    data.append("name", "Nesta");
    data.append("signs", "pop");
    data.append("signs", "swelling");
    data.append("password", "hush");
    data.append("newPassword", "hush");
    data.append("code", "123456");
    data.append("photo", new File(["x"], "x.png"));
    expect(formValues(data)).toEqual({ name: "Nesta", signs: ["pop", "swelling"] });
  });
});
