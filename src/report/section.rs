//! Parts of the page that other rooms fill: a heading, paragraphs, a table.

use super::escape::escape;

/// A part of the page with texts of its own.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Section {
    /// The heading.
    pub title: String,
    /// The paragraphs below it.
    pub paragraphs: Vec<String>,
    /// A table below them.
    pub table: Option<Table>,
}

/// A table with a line of titles; the first cell of each row names it.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Table {
    /// What it shows.
    pub caption: String,
    /// The titles of the columns.
    pub head: Vec<String>,
    /// The rows, as long as the head.
    pub rows: Vec<Vec<String>>,
}

impl Section {
    /// Writes the section as the `number`th of its kind.
    pub(super) fn write(&self, number: usize, out: &mut String) {
        open(&format!("more-{}", number + 1), &escape(&self.title), out);
        for text in &self.paragraphs {
            out.push_str(&format!("<p>{}</p>\n", escape(text)));
        }
        if let Some(t) = &self.table {
            table(&escape(&t.caption), &escaped(&t.head), t.rows.iter().map(|r| escaped(r)), out);
        }
        close(out);
    }
}

fn escaped(texts: &[String]) -> Vec<String> {
    texts.iter().map(|t| escape(t)).collect()
}

/// Opens a section with an id and a heading of HTML.
pub(super) fn open(id: &str, title: &str, out: &mut String) {
    out.push_str(&format!("<section aria-labelledby=\"{id}\">\n<h2 id=\"{id}\">{title}</h2>\n"));
}

pub(super) fn close(out: &mut String) {
    out.push_str("</section>\n");
}

/// A table of HTML cells in a box of its own that scrolls.
pub(super) fn table(
    caption: &str,
    head: &[String],
    rows: impl IntoIterator<Item = Vec<String>>,
    out: &mut String,
) {
    scroller("box", caption, out);
    out.push_str(&format!("<table class=\"list\">\n<caption>{caption}</caption>\n<thead><tr>"));
    head.iter().for_each(|cell| out.push_str(&format!("<th scope=\"col\">{cell}</th>")));
    out.push_str("</tr></thead>\n<tbody>\n");
    for row in rows {
        out.push_str("<tr>");
        for (i, cell) in row.iter().enumerate() {
            let cell =
                if i == 0 { format!("<th scope=\"row\">{cell}</th>") } else { format!("<td>{cell}</td>") };
            out.push_str(&cell);
        }
        out.push_str("</tr>\n");
    }
    out.push_str("</tbody>\n</table>\n</div>\n");
}

/// Opens a box that scrolls, with plain text that says what is in it.
pub(super) fn scroller(class: &str, label: &str, out: &mut String) {
    let label = label.replace("<bdi>", "").replace("</bdi>", "");
    out.push_str(&format!("<div class=\"{class}\" role=\"region\" tabindex=\"0\" aria-label=\"{label}\">\n"));
}
