//! What belongs to the file as a whole: carried files, identifier, metadata, bookmarks.

use std::collections::BTreeMap;

use super::*;

#[test]
fn attachments_come_back_whole_with_their_checksum() {
    let attachment = |name: &str, bytes: &[u8]| Attachment {
        name: name.into(),
        mime: "text/csv".into(),
        description: "Readings in kΩ".into(),
        relationship: Relationship::Data,
        bytes: bytes.to_vec(),
    };
    let long = [b"1,4,+,\"2\"\r\n\x00\xff".as_slice(); 500].concat();
    let mut document = document(vec![a4(vec![])]);
    document.attachments =
        vec![attachment("ν.csv", &long), attachment("../abc.csv", b"abc"), attachment("abc.csv", b"")];
    let files: BTreeMap<String, reading::Carried> = reading::carried(&read(&document));
    assert_eq!(files.keys().map(String::as_str).collect::<Vec<_>>(), ["abc-2.csv", "abc.csv", "ν.csv"]);
    assert_eq!(files["ν.csv"].bytes, long);
    assert_eq!(files["abc-2.csv"].bytes, b"");
    // MD5 of "abc" and of nothing: RFC 1321, appendix A.5.
    assert_eq!(files["abc.csv"].checksum, "900150983cd24fb0d6963f7d28e17f72");
    assert_eq!(files["abc-2.csv"].checksum, "d41d8cd98f00b204e9800998ecf8427e");
    assert!(files.values().all(|file| file.relationship == "Data" && file.kind == "text/csv"));
}

#[test]
fn equal_documents_are_equal_files_with_an_identifier_of_their_own() {
    let one = document(vec![table_page()]);
    let other = PdfDocument { title: "KR-0418".into(), ..one.clone() };
    assert_eq!(pdf(&one), pdf(&one));
    let id = |document: &PdfDocument| reading::identifier(&read(document));
    assert_eq!(id(&one), id(&one));
    assert_ne!(id(&one), id(&other));
}

#[test]
fn the_file_says_what_it_is_and_no_time_that_nobody_gave() {
    let mut document = document(vec![a4(vec![])]);
    document.title = "R & <D> \u{1}".into();
    document.keywords = vec!["ν".into(), "kΩ".into()];
    let file = read(&document);
    assert_eq!(reading::information(&file, "Title").as_deref(), Some("R & <D>  "));
    assert_eq!(reading::information(&file, "Keywords").as_deref(), Some("ν, kΩ"));
    assert_eq!((reading::information(&file, "CreationDate"), reading::information(&file, "ModDate")), (None, None));
    let packet = reading::packet(&file);
    assert!(packet.contains("<rdf:li xml:lang=\"x-default\">R &amp; &lt;D&gt;  </rdf:li>"), "{packet}");
    assert!(packet.contains("<rdf:li>ν</rdf:li><rdf:li>kΩ</rdf:li>") && !packet.contains("Date>"), "{packet}");

    document.date = Some("2026-03-14".into());
    let file = read(&document);
    assert_eq!(reading::information(&file, "CreationDate").as_deref(), Some("D:20260314"));
    assert!(reading::packet(&file).contains("<xmp:CreateDate>2026-03-14</xmp:CreateDate>"));
    document.date = Some("März 2026, noch".into());
    assert_eq!(reading::information(&read(&document), "CreationDate"), None);
}

/// Flag 4 is Print (ISO 32000-1, table 165), which PDF/A asks of every annotation (ISO 19005-3, 6.3.2; from memory).
#[test]
fn links_lie_where_they_are_seen_and_are_printed() {
    let mut document = document(vec![a4(vec![]), a4(vec![])]);
    let link = Link { page: 0, sides_mm: [20.0, 30.0, 60.0, 34.0], to_page: 1, to_y_mm: 97.0, words: "R_14,25".into() };
    document.links = vec![link.clone(), Link { to_page: 9, ..link }];
    let file = read(&document);
    let page = file.get_dictionary(file.get_pages()[&1]).expect("a page");
    let annotations = page.get(b"Annots").and_then(Object::as_array).expect("annotations");
    assert_eq!(annotations.len(), 1);
    let annotation = file.dereference(&annotations[0]).and_then(|found| found.1.as_dict()).expect("a dictionary");
    let numbers = |key: &[u8]| -> Vec<f32> {
        let list = annotation.get(key).and_then(Object::as_array).expect("a list");
        list.iter().filter_map(|number| number.as_float().ok()).collect()
    };
    // 20, 297 − 34, 60, 297 − 30 mm, and 297 − 97 mm from below, in points of 25.4/72 mm.
    let expected = [56.693, 745.512, 170.079, 756.850];
    assert!(numbers(b"Rect").iter().zip(expected).all(|(a, b)| (a - b).abs() < 1e-3), "{:?}", numbers(b"Rect"));
    assert!((numbers(b"Dest")[1] - 566.929).abs() < 1e-3);
    assert_eq!(annotation.get(b"F").and_then(Object::as_i64).ok(), Some(4));
    let target = annotation.get(b"Dest").and_then(Object::as_array).expect("a place")[0].as_reference();
    assert_eq!(target.ok(), Some(file.get_pages()[&2]));
}

#[test]
fn bookmarks_and_page_names_are_there() {
    let leaf = |title: &str, page| Bookmark { title: title.into(), page, ..Default::default() };
    let mut document = document(vec![a4(vec![]), a4(vec![])]);
    let gate = Bookmark { y_mm: 100.0, children: vec![leaf("ν(TG)", 1), leaf("gone", 9)], ..leaf("Gate", 0) };
    document.bookmarks = vec![gate, leaf("Sweeps", 1)];
    document.page_labels = vec![PageLabel { first_page: 0, prefix: "c3-".into(), first_number: 1 }];
    let file = read(&document);
    let outline = reading::outline(&file);
    assert_eq!(outline, ["0 Gate page 1 top 558.425", "1 ν(TG) page 2 top 841.89", "0 Sweeps page 2 top 841.89"]);
    let catalog = file.catalog().expect("a catalog");
    assert_eq!(catalog.get(b"PageMode").and_then(Object::as_name).ok(), Some(b"UseOutlines".as_slice()));
    assert_eq!(catalog.get(b"Lang").and_then(Object::as_str).ok(), Some(b"en-GB".as_slice()));
    assert!(catalog.has(b"PageLabels") && catalog.has(b"OutputIntents"));
}
