//! From bytes to text.

use super::ReadError;

/// The text of a file without its byte-order mark.
pub(super) fn decode(bytes: &[u8]) -> Result<&str, ReadError> {
    let marks: [(&[u8], &str); 4] = [
        (b"\xFF\xFE\0\0", "UTF-32 (little endian)"),
        (b"\0\0\xFE\xFF", "UTF-32 (big endian)"),
        (b"\xFF\xFE", "UTF-16 (little endian)"),
        (b"\xFE\xFF", "UTF-16 (big endian)"),
    ];
    if let Some((_, name)) = marks.iter().find(|(mark, _)| bytes.starts_with(mark)) {
        return Err(ReadError::Encoding(name));
    }
    if let Some(at) = bytes.iter().position(|&b| b == 0) {
        if let Some(name) = unmarked_utf16(bytes) {
            return Err(ReadError::Encoding(name));
        }
        return Err(not_text(bytes, at, "a NUL, which no text holds", "give a text file, CSV or JSON"));
    }
    let text = std::str::from_utf8(bytes).map_err(|e| {
        let advice = "save the file as UTF-8 (it may be in a Windows or Latin encoding)";
        not_text(bytes, e.valid_up_to(), "not UTF-8", advice)
    })?;
    Ok(text.strip_prefix('\u{FEFF}').unwrap_or(text))
}

fn not_text(bytes: &[u8], at: usize, what: &'static str, advice: &'static str) -> ReadError {
    ReadError::NotText { line: line_at(bytes, at), byte: at + 1, what, advice }
}

/// UTF-16 of mostly Latin text betrays itself by a zero in (nearly) every second byte.
fn unmarked_utf16(bytes: &[u8]) -> Option<&'static str> {
    let sample = &bytes[..bytes.len().min(256)];
    let pairs = sample.len() / 2;
    let zeros = |odd: usize| sample.iter().skip(odd).step_by(2).filter(|&&b| b == 0).count();
    let (even, odd) = (zeros(0), zeros(1));
    if pairs < 2 {
        None
    } else if odd * 10 >= pairs * 9 && even * 10 <= pairs {
        Some("UTF-16 (little endian)")
    } else if even * 10 >= pairs * 9 && odd * 10 <= pairs {
        Some("UTF-16 (big endian)")
    } else {
        None
    }
}

/// The line, from 1, on which byte `at` stands; lines end with LF, CR or CR LF.
pub(super) fn line_at(bytes: &[u8], at: usize) -> usize {
    let before = &bytes[..at.min(bytes.len())];
    let ends = |i: usize| before[i] == b'\n' || (before[i] == b'\r' && bytes.get(i + 1) != Some(&b'\n'));
    1 + (0..before.len()).filter(|&i| ends(i)).count()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn message(bytes: &[u8]) -> String {
        decode(bytes).unwrap_err().to_string()
    }

    #[test]
    fn names_the_encoding() {
        let utf16 = |big: bool, mark: bool| -> Vec<u8> {
            let text = if mark { "\u{FEFF}A,B\n0,1\n" } else { "A,B\n0,1\n" };
            text.encode_utf16().flat_map(|u| if big { u.to_be_bytes() } else { u.to_le_bytes() }).collect()
        };
        for mark in [false, true] {
            assert_eq!(
                message(&utf16(false, mark)),
                "the file is encoded in UTF-16 (little endian); save it as UTF-8"
            );
            assert_eq!(
                message(&utf16(true, mark)),
                "the file is encoded in UTF-16 (big endian); save it as UTF-8"
            );
        }
        assert_eq!(
            message(b"\xFF\xFE\0\0A\0\0\0"),
            "the file is encoded in UTF-32 (little endian); save it as UTF-8"
        );
    }

    #[test]
    fn names_the_byte_that_is_no_text() {
        assert_eq!(
            message(b"A,B\r\n0,\xB0\r\n"),
            "line 2: byte 8 of the file is not UTF-8; save the file as UTF-8 (it may be in a Windows or \
             Latin encoding)"
        );
        assert_eq!(
            message(b"\x7FELF\0\x01"),
            "line 1: byte 5 of the file is a NUL, which no text holds; give a text file, CSV or JSON"
        );
        assert_eq!(decode(b"\xEF\xBB\xBFA").unwrap(), "A");
    }

    #[test]
    fn counts_every_kind_of_line_end() {
        let text = b"a\nb\r\nc\rd\n\ne";
        let at = |c: u8| line_at(text, text.iter().position(|&b| b == c).unwrap());
        assert_eq!([b'a', b'b', b'c', b'd', b'e'].map(at), [1, 2, 3, 4, 6]);
    }
}
