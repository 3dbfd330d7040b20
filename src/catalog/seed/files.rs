//! The list of the files in the folder `catalog/`. A test compares it with the folder.

macro_rules! embedded {
    ($($name:literal)*) => {
        /// (name, text), ascending by name.
        pub(super) const FILES: &[(&str, &str)] = &[
            $(($name, include_str!(concat!(env!("CARGO_MANIFEST_DIR"), "/catalog/", $name, ".seed")))),*
        ];
    };
}

embedded! {
    "circulants-003"
    "circulants-007"
    "circulants-009"
    "circulants-011"
    "circulants-013"
    "circulants-015"
    "circulants-017"
    "circulants-019"
    "circulants-021"
    "circulants-023"
    "circulants-025"
    "circulants-027"
    "circulants-029"
    "circulants-031"
    "circulants-037"
    "circulants-039"
    "circulants-041"
    "circulants-043"
    "circulants-065"
    "circulants-067"
    "circulants-073"
    "circulants-093"
    "circulants-119"
    "circulants-127"
    "circulants-133"
    "circulants-153"
    "circulants-163"
    "quasi-difference-19-06-01"
    "scheme-06-06-03"
    "scheme-10-10-05"
    "scheme-12-06-06"
    "scheme-12-06-12"
    "scheme-12-12-03"
    "scheme-12-12-04"
    "scheme-15-05-15"
    "scheme-15-07-05"
    "scheme-15-09-03"
    "scheme-20-09-04"
    "turyn-016"
    "turyn-020"
    "turyn-022"
    "v-vector-02-03"
    "v-vector-04-07"
    "v-vector-04-09"
    "v-vector-05-08"
    "v-vector-06-07"
    "v-vector-06-11"
    "v-vector-08-09"
}
