use std::io::Read;

use super::Failure;

/// The whole content of a file, of stdin for `-`.
pub(super) fn read(name: &str) -> Result<Vec<u8>, Failure> {
    let content = if name == "-" {
        let mut bytes = Vec::new();
        std::io::stdin().lock().read_to_end(&mut bytes).map(|_| bytes)
    } else {
        std::fs::read(name)
    };
    content.map_err(|e| Failure::input(title(name), format!("cannot be read: {e}")))
}

/// The content of a file as text.
pub(super) fn read_text(name: &str) -> Result<String, Failure> {
    String::from_utf8(read(name)?).map_err(|e| {
        let byte = e.utf8_error().valid_up_to() + 1;
        Failure::input(title(name), format!("byte {byte} is no UTF-8 text; save the file as UTF-8"))
    })
}

/// What a file is called in messages.
pub(super) fn title(name: &str) -> &str {
    if name == "-" { "stdin" } else { name }
}
