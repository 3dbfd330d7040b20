//! The JSON objects that Trysquare prints, one file per kind.
//!
//! | type | printed by |
//! | --- | --- |
//! | [`SeekDocument`] | `seek --json`, `seek --batch` |
//! | [`NearDocument`] | `seek --budget --json`, when no exact array fits |
//! | [`CertifyDocument`] | `certify --json` |
//! | [`RecheckDocument`] | `recheck --json` |
//! | [`FloorDocument`] | `floor --json` |
//! | [`CatalogDocument`] | `catalog --json` |
//! | [`HuntDocument`] | `hunt --json` |
//! | [`ExtendDocument`] | `hunt --from … --json` |
//!
//! They borrow what they print, so an array is never copied. Keys are stable; the JSON Schemas in
//! the folder `schema/` are generated from these types.

mod catalog;
mod certify;
mod extend;
mod floor;
mod hunt;
mod near;
mod recheck;
mod seek;

pub use catalog::CatalogDocument;
pub use certify::{CertifyDocument, NamedWitness};
pub use extend::{ExtendDocument, ExtendVerdict, KindPart, KindStanding};
pub use floor::{BoundDocument, FloorDocument, MostDocument};
pub use hunt::{BestPart, FindPart, HuntDocument, HuntVerdict};
pub use near::{
    CorrelationDocument, CriteriaDocument, EfficiencyDocument, NearDocument, NearVerdict, NextDocument,
    PairDocument,
};
pub use recheck::{RecheckDocument, RecipeCheck};
pub use seek::{
    BelowPart, ErrorDocument, FloorPart, FoundDocument, NothingDocument, NothingVerdict, Rows, SeekDocument,
};
