//! The JSON objects that Trysquare prints, one file per kind.
//!
//! | type | printed by |
//! | --- | --- |
//! | [`SeekDocument`] | `seek --json`, `seek --batch` |
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
mod recheck;
mod seek;

pub use catalog::CatalogDocument;
pub use certify::{CertifyDocument, NamedWitness};
pub use extend::{ExtendDocument, ExtendVerdict, KindPart, KindStanding};
pub use floor::{BoundDocument, FloorDocument};
pub use hunt::{BestPart, FindPart, HuntDocument, HuntVerdict};
pub use recheck::{RecheckDocument, RecipeCheck};
pub use seek::{
    ErrorDocument, FloorPart, FoundDocument, NothingDocument, NothingVerdict, Rows, SeekDocument,
};
