use serde::{Deserialize, Serialize};

use crate::verify::{Engine, Field, Mismatch, RecheckReport};

/// Whether a certificate is true of an array.
#[derive(Debug, Serialize)]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub struct RecheckDocument<'a> {
    /// Whether everything that could be checked is true.
    pub holds: bool,
    /// What is wrong.
    pub mismatches: &'a [Mismatch],
    /// What an array cannot confirm or the certificate does not state.
    pub not_checked: &'a [Field],
    /// The engines that judged the array this time.
    pub engines: &'a [Engine],
    /// What came of building the recipe anew.
    pub recipe: RecipeCheck,
}

/// What came of building the recipe of a certificate anew.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
#[cfg_attr(feature = "schema", derive(schemars::JsonSchema))]
pub enum RecipeCheck {
    /// The certificate carries none.
    None,
    /// It yields the array, byte for byte.
    SameArray,
    /// It yields another array, or none.
    Differs,
}

impl<'a> RecheckDocument<'a> {
    /// The document of a report.
    #[must_use]
    pub fn new(report: &'a RecheckReport, recipe: RecipeCheck) -> Self {
        Self {
            holds: report.holds(),
            mismatches: &report.mismatches,
            not_checked: &report.not_checked,
            engines: &report.engines,
            recipe,
        }
    }
}
