//! Texts from strangers as texts of a page.

/// Longer texts are cut, so that one cell of a file cannot fill the page.
const LONGEST: usize = 120;

/// A text with everything replaced that HTML could take for its own, or that a reader would not
/// see: control characters and the marks that turn the direction of writing become visible signs.
pub(super) fn escape(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for c in text.chars() {
        match c {
            '&' => out.push_str("&amp;"),
            '<' => out.push_str("&lt;"),
            '>' => out.push_str("&gt;"),
            '"' => out.push_str("&quot;"),
            '\'' => out.push_str("&#39;"),
            '\0'..='\u{1f}' => out.push(char::from_u32(0x2400 + u32::from(c)).unwrap_or('\u{fffd}')),
            '\u{7f}' => out.push('\u{2421}'),
            _ if unseen(c) => out.push('\u{fffd}'),
            _ => out.push(c),
        }
    }
    out
}

/// Whether a character is a control, a mark of direction or no character at all.
fn unseen(c: char) -> bool {
    let n = u32::from(c);
    matches!(n, 0x80..=0x9f | 0x200b..=0x200f | 0x2028..=0x202e | 0x2060..=0x206f | 0xfeff | 0xfdd0..=0xfdef)
        || n & 0xfffe == 0xfffe
}

/// A stranger's text: cut, escaped, and kept from turning the text around it.
pub(super) fn stranger(text: &str) -> String {
    format!("<bdi>{}</bdi>", escape(&shortened(text, LONGEST)))
}

/// The text itself, or its beginning and an ellipsis.
pub(super) fn shortened(text: &str, most: usize) -> String {
    match text.char_indices().nth(most) {
        None => text.to_owned(),
        Some((end, _)) => format!("{}…", &text[..end]),
    }
}

/// About how many columns of a terminal a text takes: wide scripts count twice.
pub(super) fn width(text: &str) -> usize {
    text.chars().map(|c| if u32::from(c) >= 0x1100 { 2 } else { 1 }).sum()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn nothing_of_html_is_left() {
        assert_eq!(escape("<a href=\"x\">'&"), "&lt;a href=&quot;x&quot;&gt;&#39;&amp;");
        assert_eq!(
            escape("a\0b\n\u{7f}\u{85}\u{202e}\u{feff}\u{ffff}"),
            "a␀b␊␡\u{fffd}\u{fffd}\u{fffd}\u{fffd}"
        );
        assert_eq!(escape("°C µ 温度 ضغط"), "°C µ 温度 ضغط");
    }

    #[test]
    fn long_texts_are_cut_between_characters() {
        assert_eq!(shortened("温度温度", 3), "温度温…");
        assert_eq!(shortened("温度", 2), "温度");
        assert!(stranger(&"&".repeat(1_000_000)).len() < 1000);
    }
}
