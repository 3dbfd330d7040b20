/// The stored records, name of the file in `catalog/` and text.
#[must_use]
pub fn stored() -> &'static [(&'static str, &'static str)] {
    &[]
}
