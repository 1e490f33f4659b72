//! Six-contact bars as device files: 1 left end, 2 and 3 top (left, right), 4 right end, 5 and 6 bottom (right, left).

use std::fmt::Write;

use edgesheet::circuit::Circuit;
use edgesheet::device::ContactIdx;
use edgesheet::device::Device;
use edgesheet::diagnostic::Source;
use edgesheet::layout::Layout;
use edgesheet::network::Network;
use edgesheet::quantity::Polarity;
use edgesheet::resistance::Prediction;
use edgesheet::resistance::Reading;
use edgesheet::resistance::Setup;

/// A device read, laid out and turned into a network.
pub struct Made {
    pub device: Device,
    pub layout: Layout,
    pub network: Network,
}

/// Makes everything up to the network from the text of a device file.
pub fn make(text: &str) -> Made {
    let source = Source::new("test.toml", text);
    let device = edgesheet::device::from_source(&source).unwrap_or_else(|faults| panic!("{faults:#?}\n{text}")).value;
    let layout = edgesheet::layout::layout(&device).unwrap_or_else(|faults| panic!("{faults:#?}\n{text}")).value;
    let network = edgesheet::network::network(&layout, device.contacts.len());
    Made { device, layout, network }
}

impl Made {
    /// Solves one point at one polarity for the readings given.
    pub fn predict(&self, point: usize, polarity: Polarity, readings: &[Reading]) -> Prediction {
        self.predict_in(None, point, polarity, readings)
    }

    /// The same inside a circuit.
    pub fn predict_in(
        &self,
        circuit: Option<Circuit>,
        point: usize,
        polarity: Polarity,
        readings: &[Reading],
    ) -> Prediction {
        let point = &self.device.points[point];
        let operating = edgesheet::network::operating(&self.network, &self.device, point, polarity);
        edgesheet::resistance::predict(&self.network, &Setup { operating, circuit }, readings)
    }

    /// One reading by names in the manner of `14,25`, at the first point, exact; `-` where it has no number.
    pub fn exact(&self, polarity: Polarity, reading: &str) -> String {
        let reading = self.reading(reading);
        let answer = self.predict(0, polarity, std::slice::from_ref(&reading)).expected.remove(0);
        answer.exact.map_or_else(|| "-".to_owned(), |exact| exact.to_string())
    }

    /// A reading by the one-character names of its contacts.
    pub fn reading(&self, text: &str) -> Reading {
        let contact = |name: char| {
            let found = self.device.contacts.iter().position(|contact| contact.name == name.to_string());
            ContactIdx(found.unwrap_or_else(|| panic!("no contact {name}")))
        };
        let names: Vec<char> = text.chars().filter(|c| *c != ',').collect();
        Reading::new([contact(names[0]), contact(names[1])], [contact(names[2]), contact(names[3])])
    }
}

/// A gate or step of a test bar: name, kind, from, to (µm), filling.
pub type Part<'a> = (&'a str, &'a str, u32, u32, &'a str);

/// A six-contact bar, 600 µm long, with parts and mixing entries (each a line of `[edge]`).
pub fn six(bulk: &str, parts: &[Part], edge: &str) -> Made {
    make(&six_text(bulk, parts, edge))
}

/// The text of [`six`].
pub fn six_text(bulk: &str, parts: &[Part], edge: &str) -> String {
    let mut text = format!(
        "format = 1\n[device]\nid = \"T\"\nladder = \"spin-split\"\n[mesa]\nshape = \"bar\"\nlength_um = 600\nwidth_um = 100\n[edge]\n{edge}\n"
    );
    for (name, place) in [
        ("1", "edge = \"left\""),
        ("2", "edge = \"top\"\nx_um = 100\nwidth_um = 20\narm_um = 30"),
        ("3", "edge = \"top\"\nx_um = 500\nwidth_um = 20\narm_um = 30"),
        ("4", "edge = \"right\""),
        ("5", "edge = \"bottom\"\nx_um = 500\nwidth_um = 20\narm_um = 30"),
        ("6", "edge = \"bottom\"\nx_um = 100\nwidth_um = 20\narm_um = 30"),
    ] {
        let _ = write!(text, "[[contact]]\nname = \"{name}\"\n{place}\n");
    }
    for (name, kind, from, to, _) in parts {
        let _ = write!(text, "[[{kind}]]\nname = \"{name}\"\nfrom_um = {from}\nto_um = {to}\n");
    }
    let fillings: Vec<String> = parts.iter().map(|(name, _, _, _, filling)| format!("{name} = {filling}")).collect();
    let _ = write!(text, "[[point]]\nname = \"p\"\nbulk = {bulk}\nfillings = {{ {} }}\n", fillings.join(", "));
    text
}

/// Both polarities.
pub const BOTH: [Polarity; 2] = Polarity::BOTH;
