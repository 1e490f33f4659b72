//! What is understood of a bench.

use crate::device::Bench;
use crate::device::ContactIdx;
use crate::device::Device;
use crate::device::Link;
use crate::quantity::printed::as_given;
use crate::report::Understood;
use crate::report::names;
use crate::report::understood::device::about;
use crate::report::understood::device::point_row;
use crate::report::understood::device::readings;
use crate::report::understood::device::rim_lines;
use crate::report::understood::device::unnamed_gates;

/// A bench, and where it could be laid out, its contacts rim by rim, clockwise. Each device has more to say by itself.
pub fn understood_bench(
    file: &str,
    (device, bench): (&Device, &Bench),
    rims: Option<&[Vec<ContactIdx>]>,
) -> Understood {
    let posts = device.contacts.len() - bench.posts;
    let posts: Vec<&str> = device.contacts[posts..].iter().map(|post| post.name.as_str()).collect();
    let links = bench.links.iter().map(|link| link_row(device, link)).collect();
    Understood::new(file, format!("bench of {}", device.id))
        .saying("about", about(device))
        .with("devices", bench.parts.iter().map(|part| device_row(&part.name, &part.device)).collect())
        .saying("rim", rims.map(|rims| rim_lines(device, rims)).unwrap_or_default())
        .saying("posts", if posts.is_empty() { Vec::new() } else { vec![posts.join(", ")] })
        .with("wires", links)
        .with("points", device.points.iter().map(|point| point_row(device, point)).collect())
        .saying("assumed", bench.parts.iter().flat_map(|part| assumed(&part.name, &part.device)).collect())
        .saying("readings", vec![readings(device)])
}

fn device_row(name: &str, device: &Device) -> Vec<String> {
    vec![name.to_owned(), device.id.clone(), about(device).concat()]
}

fn link_row(device: &Device, link: &Link) -> Vec<String> {
    let [from, to] = link.ends.map(|end| names::contact_name(device, end).to_owned());
    vec![from, to, format!("{} Ω", as_given(link.ohm))]
}

fn assumed(name: &str, device: &Device) -> Vec<String> {
    unnamed_gates(device).into_iter().map(|line| format!("{name}: {line}")).collect()
}
