/** Pieces of a page: text made safe, tables with captions, sections with headings, figures with text alternatives. */

/** Markup that is already safe to put into a page. */
export interface Markup {
  readonly html: string;
}

/** Text or markup; text is made safe. */
export type Content = string | number | Markup;

const ENTITIES: Readonly<Record<string, string>> = { "&": "&amp;", "<": "&lt;", ">": "&gt;", '"': "&quot;" };

/** Text as it may stand in an element or an attribute in double quotes. */
export function escapeText(text: string): string {
  return text.replace(/[&<>"]/g, (character) => ENTITIES[character]);
}

/** Content as markup. */
export function markup(content: Content): string {
  return typeof content === "object" ? content.html : escapeText(String(content));
}

/** Markup from a template; what is put in is made safe unless it is markup itself. */
export function html(strings: TemplateStringsArray, ...values: (Content | readonly Content[])[]): Markup {
  const put = (value: Content | readonly Content[]) =>
    Array.isArray(value) ? value.map((each) => markup(each as Content)).join("") : markup(value as Content);
  return { html: strings.reduce((text, part, i) => text + (i === 0 ? "" : put(values[i - 1])) + part, "") };
}

/** Nothing. */
export const NOTHING: Markup = { html: "" };

/** How one column of a table is set. */
export interface Column {
  readonly head: Content;
  /** Figures are set flush right, with digits of one width. */
  readonly numeric?: boolean;
}

/**
 * A table. The first cell of every row heads the row.
 * @param caption what it shows, read before the table
 */
export function dataTable(caption: string, columns: readonly Column[], rows: readonly (readonly Content[])[]): Markup {
  const kind = (i: number) => (columns[i].numeric === true ? { html: ' class="number"' } : NOTHING);
  const head = columns.map(({ head }, i) => html`<th scope="col"${kind(i)}>${head}</th>`);
  const body = rows.map((row) => {
    const cells = row.map((cell, i) =>
      i === 0 ? html`<th scope="row"${kind(i)}>${cell}</th>` : html`<td${kind(i)}>${cell}</td>`,
    );
    return html`<tr>${cells}</tr>\n`;
  });
  return html`<section class="wide" aria-label="${caption}" tabindex="0">
<table>
<caption><span>${caption}</span></caption>
<thead><tr>${head}</tr></thead>
<tbody>
${body}</tbody>
</table>
</section>
`;
}

/** A section with its heading, and the place that the contents point to. */
export interface Section {
  readonly id: string;
  readonly title: string;
  readonly content: readonly Markup[];
}

export function sectionMarkup({ id, title, content }: Section): Markup {
  return html`<section id="${id}" aria-labelledby="${id}-title">
<h2 id="${id}-title">${title}</h2>
${content}</section>
`;
}
