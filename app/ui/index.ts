/**
 * The interface's parts. They know nothing of the trade; every one renders on the server and works without script.
 * Import from "~/ui"; DataTable ("~/ui/data-table"), SearchSelect ("~/ui/search-select") and charts ("~/ui/charts/…") by
 * path, so that pages without them stay small.
 *
 * Actions
 *   Button        look: primary|secondary|quiet|danger, size: regular|large, wide, busy, and a button's props
 *   ButtonLink    the same looks, and a router Link's props
 *   ConfirmButton label, question, confirmLabel, name?, value?, look?, size?, busy?   (inside a Form)
 *   TextLink      a router Link's props;  LinkRow children
 *   buttonClasses({ look, size, wide })
 * Words
 *   PageHeading   children, above?, below?, actions?
 *   Lede          children, note?, as?: p|h1|h2;  Interval lower, upper (texts);  Attention children
 *   Note          kind: info|attention|serious|settled, title?, children?, role?, id?
 *   EmptyState    title, children, actions?, as?
 *   DescriptionList items: { term, detail, key? }[]
 *   Disclosure    summary, children, open?, name?
 *   Pager         page, pageSize, total, what, param?
 *   VisuallyHidden children;  SkipLink to?, children?
 * Forms
 *   Form          errors?, values?, fetcher?, idPrefix?, summaryTitle?, and a router Form's props (method is post)
 *   FormActions   children, note?
 *   ErrorSummary  errors, title?, idPrefix?   (Form shows it by itself)
 *   Field         name, label, help?, errors?, optional?, children: one input; errors and values come from Form
 *   TextInput, DateInput, TimeInput   an input's props, width: short|medium|full, size: regular|large
 *   NumberInput   the same, decimals?, unit?
 *   TextArea      a textarea's props, width?
 *   Select        options: ({ value, label, disabled? } | { label, options })[], placeholder?, width?, size?
 *   ChoiceButtons name, legend, choices: { value, label, detail?, disabled? }[], mode: single|multiple,
 *                 layout: segments|chips, help?, errors?, optional?, size?, defaultValue?, onChange?(value, checked)
 *   Checkbox      name, label, help?, errors?, size?, and an input's props
 *   FileInput     an input's props;  Fieldset legend, help?, children, id?
 *   FormErrors, FormValues (types), formErrorsFromZod(error), formValues(formData), hasErrors(errors),
 *   fieldId(name, prefix?)
 * Marks and figures
 *   SpotMark      spot: filled|half|crossed|ring, children, detail?;  SpotShape spot, className?
 *   StrokeTally   done: boolean[], label?, size: inline|large, showCount?
 *   ChalkStatus   line: broken|solid, children?
 *   RateBar       rate: { estimate, lower, upper } | null, reason?, scale, series?: 1..8, unstable?, decimals?, unit?
 *   RateAxis      scale, label;  NoRate reason;  niceScale(max, count?) -> { max, ticks };  formatTick(value)
 * Charts          each ~/ui/charts/<file> has its component as default export too, for lazy(); all take title (the words
 *                 for screen readers) and caption?; a null point is a gap, unstable?: true a hollow spot
 *   interval-chart    IntervalChart   groups: { label, points: { series, label, rate, unstable?, note? }[] }[], unit,
 *                                     reference?, decimals?, max?, logarithmic? (ratios: no limits end in arrows)
 *   line-with-band    LineWithBand    periods, series: { series, label, points }[], unit, reference?
 *   control-chart     ControlChart    periods, points: ({ value, lower, upper, signal, unstable? } | null)[], centre,
 *                                     limitLabel, unit, gapNote?
 *   threshold-chart   ThresholdChart  periods, values, threshold, crossings: number[] (indexes), unit
 *   funnel-chart      FunnelChart     points: { label, exposure, rate, outside, unstable? }[], centre,
 *                                     limits: { label, points: { exposure, lower, upper }[] }[], xUnit, yUnit
 *   step-curve        StepCurve       curves: { series, label, steps: { x, y, lower, upper }[], censored }[], start,
 *                                     xUnit, yUnit, mark?: { y, label }
 *   burden-chart      BurdenChart     points: { label, x, y, unstable?, events }[], curves: { value, label }[] (equal
 *                                     products), xUnit, yUnit
 *   two-sided-bars    TwoSidedBars    rows: { label, left, right, middle?: { text } }[], leftLabel, rightLabel, unit,
 *                                     decimals
 *   period-grid       PeriodGrid      rows: { label, href?, cells: ({ share, text } | null)[] }[],
 *                                     periods: { short, long }[], emptyText
 * Frame
 *   TopBar        name, home, scope?, person?;  Mark className?
 *   NavLinks      items: { to, label, end? }[], label?
 *   Page          children, width: wide|text|form, bottomNav?;  Region heading?, children, id?
 * Helpers         joinClasses(...parts); fonts are in "~/ui/fonts": fontPreloads, rubikLatinUrl
 * Classes         `editable-word` for the controls inside a sentence; `on-dark` where the ground is the bar
 */
export { Button, ButtonLink, type ButtonLook, buttonClasses, type TargetSize } from "./button";
export { ChalkStatus } from "./chalk-status";
export { Checkbox } from "./checkbox";
export { type Choice, ChoiceButtons } from "./choice-buttons";
export { joinClasses } from "./classes";
export { ConfirmButton } from "./confirm-button";
export { DateInput } from "./date-input";
export { type Description, DescriptionList } from "./description-list";
export { Disclosure } from "./disclosure";
export { EmptyState } from "./empty-state";
export { ErrorSummary } from "./error-summary";
export { Field } from "./field";
export { Fieldset } from "./fieldset";
export { FileInput } from "./file-input";
export { Form, FormActions } from "./form";
export { fieldId } from "./form-context";
export { type FormErrors, type FormValues, formErrorsFromZod, formValues, hasErrors } from "./form-errors";
export { Attention, Interval, Lede } from "./lede";
export { Mark } from "./mark";
export { type NavItem, NavLinks } from "./nav-links";
export { Note, type NoteKind } from "./note";
export { NumberInput } from "./number-input";
export { Page, Region } from "./page";
export { PageHeading } from "./page-heading";
export { Pager } from "./pager";
export { NoRate, RateAxis, RateBar, type RateEstimate } from "./rate-bar";
export { formatTick, type NiceScale, niceScale } from "./scale";
export { Select, type SelectGroup, type SelectOption } from "./select";
export { SkipLink } from "./skip-link";
export { type Spot, SpotMark, SpotShape } from "./spot-mark";
export { StrokeTally } from "./stroke-tally";
export { TextArea } from "./text-area";
export { TextInput } from "./text-input";
export { LinkRow, TextLink } from "./text-link";
export { TimeInput } from "./time-input";
export { TopBar } from "./top-bar";
export { VisuallyHidden } from "./visually-hidden";
