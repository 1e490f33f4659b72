//! Unpacking streams (ISO 32000-1, 7.4): none, or deflated, also with the predictors of PNG that tables of objects use.

use std::io::Read as _;

use crate::archive::pdf::Read;
use crate::archive::pdf::lexer::Budget;
use crate::archive::pdf::object::Dict;
use crate::archive::pdf::object::Object;

/// The bytes of a stream, unpacked, at most as many as the budget still holds.
pub fn decoded(dict: &Dict, bytes: &[u8], budget: &Budget) -> Read<Vec<u8>> {
    let filters = one_or_many(dict.get("Filter"));
    let parameters = one_or_many(dict.get("DecodeParms"));
    match filters {
        [] => {
            budget.spend_bytes(bytes.len())?;
            Ok(bytes.to_vec())
        }
        [Object::Name(name)] if matches!(name.as_slice(), b"FlateDecode" | b"Fl") => {
            let inflated = inflated(bytes, budget)?;
            match parameters.first().and_then(Object::dict) {
                Some(parameters) => unpredicted(inflated, parameters),
                None => Ok(inflated),
            }
        }
        _ => Err("a stream is packed in a way that sheets do not use".to_owned()),
    }
}

fn one_or_many(object: &Object) -> &[Object] {
    match object {
        Object::Null => &[],
        Object::Array(list) => list,
        one => std::slice::from_ref(one),
    }
}

fn inflated(bytes: &[u8], budget: &Budget) -> Read<Vec<u8>> {
    let most = budget.bytes_left();
    let mut out = Vec::new();
    let reader = flate2::read::ZlibDecoder::new(bytes);
    let read = reader.take(most as u64 + 1).read_to_end(&mut out);
    budget.spend_bytes(out.len())?;
    read.map_err(|_| "a packed stream was changed or cut".to_owned())?;
    Ok(out)
}

/// Undoes the predictors of PNG (PNG specification, 2nd edition, 9.2): none, left, above, average, Paeth.
fn unpredicted(bytes: Vec<u8>, parameters: &Dict) -> Read<Vec<u8>> {
    let value = |name: &str, usual: i64| parameters.get(name).int().unwrap_or(usual);
    if value("Predictor", 1) == 1 {
        return Ok(bytes);
    }
    let bits = value("Colors", 1).saturating_mul(value("BitsPerComponent", 8));
    let row_bits = bits.saturating_mul(value("Columns", 1));
    if value("Predictor", 1) < 10 || bits <= 0 || !(1..=8_000_000).contains(&row_bits) {
        return Err("a stream is packed in a way that sheets do not use".to_owned());
    }
    let (pixel, row) = ((bits as usize).div_ceil(8), (row_bits as usize).div_ceil(8));
    let mut above = vec![0; row];
    let mut out = Vec::with_capacity(bytes.len());
    for line in bytes.chunks(row + 1) {
        let mut current = vec![0; row];
        for at in 0..line.len() - 1 {
            let left = if at >= pixel { current[at - pixel] } else { 0 };
            let corner = if at >= pixel { above[at - pixel] } else { 0 };
            current[at] = line[at + 1].wrapping_add(predicted(line[0], (left, above[at], corner)));
        }
        out.extend_from_slice(&current[..line.len() - 1]);
        above = current;
    }
    Ok(out)
}

fn predicted(kind: u8, (left, above, corner): (u8, u8, u8)) -> u8 {
    match kind {
        1 => left,
        2 => above,
        3 => ((u16::from(left) + u16::from(above)) / 2) as u8,
        4 => {
            let estimate = i16::from(left) + i16::from(above) - i16::from(corner);
            let far = |one: u8| (estimate - i16::from(one)).abs();
            let nearest = if far(left) <= far(above) && far(left) <= far(corner) { left } else { above };
            if far(nearest) <= far(corner) { nearest } else { corner }
        }
        _ => 0,
    }
}
