use serde::Serialize;

use crate::catalog::Parent;
use crate::recipe::Recipe;

/// One parent on the shelf.
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct CatalogDocument<'a> {
    /// The number of runs.
    pub runs: u64,
    /// The strength.
    pub strength: u32,
    /// The mix, canonical.
    pub mix: String,
    /// How the array is built.
    pub recipe: &'a Recipe,
    /// Where it comes from.
    pub source: &'a str,
}

impl<'a> CatalogDocument<'a> {
    /// The document of a parent.
    #[must_use]
    pub fn new(runs: u64, strength: u32, parent: &'a Parent) -> Self {
        Self { runs, strength, mix: parent.bag.to_string(), recipe: &parent.recipe, source: &parent.source }
    }
}
