use scraper::{Html, Selector};

use super::*;
use crate::exchange::{ReadOptions, Symbols, read_any};
use crate::verify::{Demand, certify, nearness};

/// The page as a parser of HTML sees it: no error, every id once, nothing fetched, nothing run.
fn parsed(text: &str) -> Html {
    let page = Html::parse_document(text);
    assert!(page.errors.is_empty(), "{:?}", page.errors);
    let all = |selector: &str| -> Vec<scraper::ElementRef<'_>> {
        page.select(&Selector::parse(selector).unwrap()).collect()
    };
    let mut ids: Vec<&str> = all("[id]").iter().filter_map(|e| e.attr("id")).collect();
    let count = ids.len();
    ids.sort_unstable();
    ids.dedup();
    assert_eq!(ids.len(), count, "an id stands twice");
    for element in all("[aria-labelledby]") {
        assert!(ids.binary_search(&element.attr("aria-labelledby").unwrap()).is_ok());
    }
    for element in all("*") {
        let name = element.value().name();
        assert!(
            !["script", "iframe", "link", "img", "object", "embed", "form", "base"].contains(&name),
            "{name}"
        );
        for (key, _) in element.value().attrs() {
            assert!(
                !key.starts_with("on") && !["src", "href", "style", "srcset"].contains(&key),
                "{name} {key}"
            );
        }
    }
    assert_eq!(all("h1").len(), 1);
    assert!(all("th").iter().all(|th| th.attr("scope").is_some()));
    assert_eq!(all("table").len(), all("caption").len());
    assert!(!text.contains("url(") && !text.contains("@import") && !text.contains("http://"));
    page
}

fn texts(page: &Html, selector: &str) -> Vec<String> {
    page.select(&Selector::parse(selector).unwrap()).map(|e| e.text().collect()).collect()
}

fn half() -> Array {
    Array::from_rows(vec![2, 2, 2], &[[0, 0, 0], [0, 1, 1], [1, 0, 1], [1, 1, 0]]).unwrap()
}

fn page_of(bytes: &[u8], strength: usize) -> String {
    let received = read_any(bytes, &ReadOptions::default()).unwrap();
    let judgement = certify(&received.array, &Demand::strength(strength)).unwrap();
    let near = nearness(&received.array);
    let mut page = Page::new("a.csv", &received.array, Labels::Received(&received));
    page.strength = strength;
    page.certificate = Some(&judgement.certificate);
    page.witness = judgement.witness.as_ref();
    page.nearness = Some(&near);
    page.read_as = vec![received.describe()];
    html(&page)
}

#[test]
fn a_small_page() {
    let array = half();
    let judgement = certify(&array, &Demand::strength(2)).unwrap();
    let mut page = Page::new("2^3 at strength 2", &array, Labels::Symbols(Symbols::Zero));
    page.certificate = Some(&judgement.certificate);
    page.floor = Some(Floor { runs: 4, reason: "degrees of freedom".into(), smaller: Smaller::Impossible });
    page.recipe = Some("all points".into());
    page.commands = vec!["trysquare certify 'a & b.csv'".into()];
    page.sections = vec![Section {
        title: "More & more".into(),
        paragraphs: vec!["<one>".into()],
        table: Some(Table {
            caption: "c".into(),
            head: vec!["a".into(), "b".into()],
            rows: vec![vec!["1".into(), "<2>".into()]],
        }),
    }];
    let text = html(&page);
    let found = parsed(&text);
    assert_eq!(texts(&found, ".few"), ["Orthogonal at strength 2"]);
    assert_eq!(texts(&found, ".plan tbody tr").len(), 4);
    assert_eq!(texts(&found, ".plan tbody td").concat(), "000011101110");
    assert_eq!(texts(&found, ".grid tbody td").concat(), "······");
    assert!(texts(&found, "#confusion + p")[0].starts_with("Main effects are confused with interactions"));
    assert!(text.contains("This plan has just so many"));
    let style = text.find("<style>").unwrap()..text.find("</style>").unwrap();
    let plain = text[..style.start].to_owned() + &text[style.end..];
    insta::assert_snapshot!("small", plain);
}

#[test]
fn the_reason_for_a_no_is_in_the_words_of_the_file() {
    let text = page_of(b"heat,stir\nlow,slow\nlow,slow\nhigh,slow\nhigh,fast\n", 2);
    let found = parsed(&text);
    assert_eq!(texts(&found, ".few"), ["Not orthogonal at strength 2"]);
    assert!(texts(&found, ".evidence")[0].contains("stir = fast"), "{:?}", texts(&found, ".evidence"));
    // By hand: low/slow 2, high/slow 1, high/fast 1, low/fast 0 with four runs for four combinations.
    assert_eq!(texts(&found, ".grid td.e3"), ["∅ 1"]);
    assert_eq!(texts(&found, ".grid td.own"), ["·", "1"]);
    assert!(texts(&found, "#balance ~ .box td").concat().contains("low with fast: never"));
}

#[test]
fn strangers_cannot_write_html() {
    let long = "x".repeat(100_000);
    let file = format!(
        "<script>alert(1)</script>,\"\"\"><img src=x onerror=y>\",ضغط\u{202e},{long}\n\
         <b>,&amp;,'a',]]>\n-->,</td>,حار\u{7},{{}}\n<b>,</td>,حار\u{7},]]>\n-->,&amp;,'a',]]>\n"
    );
    let text = page_of(file.as_bytes(), 2);
    let found = parsed(&text);
    assert!(text.len() < 100_000, "{}", text.len());
    assert!(texts(&found, "bdi").iter().any(|t| t == "<script>alert(1)</script>"));
    assert!(!text.contains('\u{202e}') && !text.contains('\u{7}'));
}

#[test]
fn any_page_can_be_written() {
    let one = Array::from_rows(vec![65_535], &[[65_534]]).unwrap();
    let wide = Array::from_fn(3, vec![2; 500], |i, j| ((i + j) % 2) as u16).unwrap();
    let judged = certify(&half(), &Demand::strength(3)).unwrap();
    for array in [&one, &wide, &half()] {
        let near = nearness(array);
        for strength in [0, 1, 7] {
            let mut page = Page::new("", array, Labels::Given { names: &[], settings: &[] });
            page.strength = strength;
            parsed(&html(&page));
            // Parts about another array are shown as stated.
            page.certificate = Some(&judged.certificate);
            page.witness = judged.witness.as_ref();
            page.nearness = Some(&near);
            parsed(&html(&page));
        }
    }
}

#[test]
fn large_arrays_make_no_large_pages() {
    let levels: Vec<u16> = (0..80).map(|j| 2 + j % 7).collect();
    for factors in [64, 80] {
        let levels = levels[..factors].to_vec();
        let array = Array::from_fn(1000, levels.clone(), |i, j| {
            ((i * i * (j + 1) + i / (j + 2)) % usize::from(levels[j])) as u16
        });
        let array = array.unwrap();
        let near = nearness(&array);
        let mut page = Page::new("large", &array, Labels::Symbols(Symbols::Coded));
        page.nearness = Some(&near);
        let text = html(&page);
        assert!(text.len() < 2_000_000, "{}", text.len());
        let found = parsed(&text);
        assert_eq!(texts(&found, ".plan td").len(), MOST_RUNS * MOST_FACTORS);
        assert!(texts(&found, "#plan + .note")[0].contains("the first 256 of 1000 runs"));
        assert_eq!(texts(&found, ".grid").is_empty(), factors > MOST_FACTORS);
    }
}

#[test]
fn the_same_page_for_any_number_of_threads() {
    let array = Array::from_fn(50, vec![3; 30], |i, j| ((i * (j + 1) + i * i) % 3) as u16).unwrap();
    let page = Page::new("p", &array, Labels::Symbols(Symbols::Zero));
    let on = |n| rayon::ThreadPoolBuilder::new().num_threads(n).build().unwrap().install(|| html(&page));
    assert_eq!(on(1), on(3));
}

/// Relative luminance and contrast as the Web Content Accessibility Guidelines 2.1 define them \[memory\].
fn contrast(a: &str, b: &str) -> f64 {
    let luminance = |colour: &str| {
        let hex: String = match colour.len() {
            4 => colour[1..].chars().flat_map(|c| [c, c]).collect(),
            _ => colour[1..].to_owned(),
        };
        let part = |i: usize| {
            let v = f64::from(u8::from_str_radix(&hex[i..i + 2], 16).unwrap()) / 255.0;
            if v <= 0.03928 { v / 12.92 } else { ((v + 0.055) / 1.055).powf(2.4) }
        };
        0.2126 * part(0) + 0.7152 * part(2) + 0.0722 * part(4)
    };
    let (a, b) = (luminance(a), luminance(b));
    (a.max(b) + 0.05) / (a.min(b) + 0.05)
}

#[test]
fn every_text_stands_out() {
    const STYLE: &str = include_str!("page.css");
    assert!((contrast("#ffffff", "#000") - 21.0).abs() < 1e-9);
    let mut seen = 0;
    for tag in ["t0", "t1", "t2", "t3", "t4", "t5", "t6", "t7", "e1", "e2", "e3"] {
        let rule = STYLE.split_once(&format!(".{tag}{{background:")).unwrap().1;
        let (background, rest) = rule.split_once(";color:").unwrap();
        let colour = &rest[..7];
        assert!(contrast(background, colour) >= 4.5, "{tag} {background} {colour}");
    }
    for theme in STYLE.split(":root{").skip(1) {
        let value = |name: &str| {
            let rest = theme.split_once(&format!("--{name}:")).unwrap().1;
            rest[..rest.find([';', '}']).unwrap()].to_owned()
        };
        for ink in ["ink", "soft", "rule", "yes", "no", "near"] {
            for ground in ["paper", "card"] {
                assert!(contrast(&value(ink), &value(ground)) >= 4.5, "{ink} on {ground}");
                seen += 1;
            }
        }
    }
    assert_eq!(seen, 36, "light, dark and print");
}
