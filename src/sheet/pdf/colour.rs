//! What the numbers of a colour mean: sRGB (IEC 61966-2-1:1999), told by a small ICC profile of our own.
//!
//! The profile follows ICC.1:2004-10 (profile version 4.2), the newest that PDF 1.7 knows: a header, a table of tags,
//! and for each tag its data, all numbers big-endian.

use lopdf::Stream;

use crate::sheet::pdf::Entries;
use crate::sheet::pdf::dictionary;
use crate::sheet::pdf::name;

/// Colours of the primaries red, green, blue as X, Y, Z, adapted from the white D65 of sRGB to the profile's D50.
const PRIMARIES: [[f64; 3]; 3] =
    [[0.436041, 0.222485, 0.013920], [0.385113, 0.716905, 0.097067], [0.143046, 0.060610, 0.713913]];

/// The adaptation from D65 to D50 (Bradford transform, ICC.1:2004-10 annex E), row by row.
const ADAPTATION: [f64; 9] =
    [1.047886, 0.022919, -0.050216, 0.029582, 0.990484, -0.017079, -0.009252, 0.015073, 0.751678];

/// The white D50 of the profile (ICC.1:2004-10, 7.2.16).
const WHITE: [f64; 3] = [0.9642, 1.0, 0.8249];

/// The curve of sRGB: ((v + 0.055)/1.055)^2.4, and v/12.92 up to 0.04045 (IEC 61966-2-1:1999, 5.2), as the five
/// numbers g, a, b, c, d of parametric curve 3.
const CURVE: [f64; 5] = [2.4, 1.0 / 1.055, 0.055 / 1.055, 1.0 / 12.92, 0.04045];

/// Length of a profile's header in bytes.
const HEADER: usize = 128;

/// Catalog entry that names the colour space of the pages.
pub(super) fn entries(file: &mut lopdf::Document) -> Entries {
    let profile = file.add_object(Stream::new(dictionary([("N", 3.into())]), profile()));
    let intent = dictionary([
        ("Type", name("OutputIntent")),
        ("S", name("GTS_PDFA1")),
        ("OutputConditionIdentifier", lopdf::text_string("sRGB")),
        ("Info", lopdf::text_string("sRGB, IEC 61966-2-1:1999")),
        ("DestOutputProfile", profile.into()),
    ]);
    vec![("OutputIntents", vec![intent.into()].into())]
}

/// The bytes of the profile.
fn profile() -> Vec<u8> {
    let curve = || tagged(b"para", [vec![0, 3, 0, 0], fixed(&CURVE)].concat());
    let colour = |xyz: &[f64]| tagged(b"XYZ ", fixed(xyz));
    let [red, green, blue] = PRIMARIES;
    let tags: [(&[u8; 4], Vec<u8>); 10] = [
        (b"desc", words("sRGB")),
        (b"cprt", words("No rights reserved")),
        (b"wtpt", colour(&WHITE)),
        (b"chad", tagged(b"sf32", fixed(&ADAPTATION))),
        (b"rXYZ", colour(&red)),
        (b"gXYZ", colour(&green)),
        (b"bXYZ", colour(&blue)),
        (b"rTRC", curve()),
        (b"gTRC", curve()),
        (b"bTRC", curve()),
    ];
    let mut table = (tags.len() as u32).to_be_bytes().to_vec();
    let mut data = Vec::new();
    let start = HEADER + 4 + 12 * tags.len();
    for (signature, content) in tags {
        table.extend(signature);
        table.extend(((start + data.len()) as u32).to_be_bytes());
        table.extend((content.len() as u32).to_be_bytes());
        data.extend(content);
        data.resize(data.len().next_multiple_of(4), 0);
    }
    [header(start + data.len()), table, data].concat()
}

/// Header of a display profile from RGB to XYZ (ICC.1:2004-10, 7.2); fields that say nothing stay 0.
fn header(size: usize) -> Vec<u8> {
    let mut header = vec![0; HEADER];
    let mut put = |place: usize, bytes: &[u8]| {
        header.iter_mut().skip(place).zip(bytes).for_each(|(target, &byte)| *target = byte);
    };
    put(0, &(size as u32).to_be_bytes());
    put(8, &[0x04, 0x20]);
    put(12, b"mntrRGB XYZ ");
    // The profile is dated with the standard it describes, 1 January 1999: year, month, day.
    put(24, &[0x07, 0xCF, 0, 1, 0, 1]);
    put(36, b"acsp");
    put(68, &fixed(&WHITE));
    header
}

/// Data of a tag: its type, four bytes of 0, its content.
fn tagged(kind: &[u8; 4], content: Vec<u8>) -> Vec<u8> {
    [kind.to_vec(), vec![0; 4], content].concat()
}

/// Numbers with 16 bits before and 16 after the point.
fn fixed(numbers: &[f64]) -> Vec<u8> {
    numbers.iter().flat_map(|number| ((number * 65_536.0).round() as i32).to_be_bytes()).collect()
}

/// A text in English: one record of 12 bytes, then the text in UTF-16, which begins at byte 28.
fn words(text: &str) -> Vec<u8> {
    let characters: Vec<u8> = text.encode_utf16().flat_map(u16::to_be_bytes).collect();
    let record = [1, 12].map(u32::to_be_bytes).concat();
    let place = [characters.len() as u32, 28].map(u32::to_be_bytes).concat();
    tagged(b"mluc", [record, b"enUS".to_vec(), place, characters].concat())
}

#[cfg(test)]
mod tests {
    use super::*;
    use nalgebra::Matrix3;
    use nalgebra::Vector3;

    /// The finest step of numbers in a profile.
    const STEP: f64 = 1.0 / 65_536.0;

    /// Chromaticities of the primaries and of white: IEC 61966-2-1:1999, table 1 (values from memory).
    fn linear_to_xyz() -> Option<Matrix3<f64>> {
        let xyz = |x: f64, y: f64| Vector3::new(x / y, 1.0, (1.0 - x - y) / y);
        let primaries = Matrix3::from_columns(&[xyz(0.64, 0.33), xyz(0.30, 0.60), xyz(0.15, 0.06)]);
        let strengths = primaries.try_inverse()? * xyz(0.3127, 0.3290);
        Some(primaries * Matrix3::from_diagonal(&strengths))
    }

    /// The cone responses of the Bradford transform: ICC.1:2004-10, annex E (values from memory).
    fn adaptation() -> Option<Matrix3<f64>> {
        let cones = Matrix3::new(0.8951, 0.2664, -0.1614, -0.7502, 1.7135, 0.0367, 0.0389, -0.0685, 1.0296);
        let from = cones * Vector3::new(0.3127 / 0.3290, 1.0, (1.0 - 0.3127 - 0.3290) / 0.3290);
        let to = cones * Vector3::from(WHITE);
        Some(cones.try_inverse()? * Matrix3::from_diagonal(&to.component_div(&from)) * cones)
    }

    #[test]
    fn primaries_and_adaptation_follow_from_the_standards() {
        let adaptation = adaptation().expect("regular");
        let primaries = adaptation * linear_to_xyz().expect("regular");
        for (column, primary) in PRIMARIES.iter().enumerate() {
            for (row, &value) in primary.iter().enumerate() {
                assert!((primaries[(row, column)] - value).abs() < STEP, "{column} {row} {}", primaries[(row, column)]);
            }
        }
        for (place, &value) in ADAPTATION.iter().enumerate() {
            assert!((adaptation[(place / 3, place % 3)] - value).abs() < STEP, "{place}");
        }
    }

    #[test]
    fn white_is_the_sum_of_the_primaries() {
        for (row, white) in WHITE.iter().enumerate() {
            let sum: f64 = PRIMARIES.iter().map(|primary| primary[row]).sum();
            assert!((sum - white).abs() < STEP, "{row}");
        }
    }

    #[test]
    fn the_table_of_tags_fits_the_file() {
        let profile = profile();
        let number = |place: usize| u32::from_be_bytes(profile[place..place + 4].try_into().expect("four")) as usize;
        assert_eq!(number(0), profile.len());
        assert_eq!(&profile[36..40], b"acsp");
        for tag in 0..number(HEADER) {
            let (start, length) = (number(HEADER + 8 + 12 * tag), number(HEADER + 12 + 12 * tag));
            assert!(start % 4 == 0 && start + length <= profile.len());
            assert_eq!(number(start + 4), 0, "four bytes of 0 after the type");
        }
    }
}
