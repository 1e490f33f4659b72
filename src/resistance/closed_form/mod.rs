//! Closed forms: readings as sums Σ a_r/ν_r over the regions, with rational a_r.
//!
//! Within one ordering of the fillings the readings of a mesa are usually such sums, unmixed and fully mixed. The a_r are
//! fitted on small fillings in the ordering of the operating point and verified exactly on at least twice as many
//! others and on the point itself; where that fails there is no closed form. Where channels mix over a length a form must
//! hold exactly without mixing and with full mixing, and in floats at the point: then no length enters it.

mod fit;
mod samples;
mod words;

use crate::conductance::Conductance;
use crate::conductance::conductance;
use crate::device::Device;
use crate::device::Mixing;
use crate::device::OperatingPoint;
use crate::device::OverlayIdx;
use crate::device::joined_name;
use crate::network::Coupling;
use crate::network::FaceIdx;
use crate::network::FaceLabel;
use crate::network::Network;
use crate::network::Operating;
use crate::network::channels;
use crate::number::Rational;
use crate::resistance::Reading;
use crate::resistance::closed_form::fit::Entries;
use crate::resistance::closed_form::fit::Fit;
use crate::resistance::closed_form::fit::dot;
use crate::resistance::closed_form::fit::inverses;
use crate::resistance::islands::Islands;

/// A part of the device with a filling of its own: all faces under one set of overlays. Regions that have one filling at
/// a point can be tied: what is then said holds while they stay equal.
#[derive(Clone, Debug, PartialEq)]
pub struct FillingRegion {
    /// `bulk`, `TG`, `TG+BG`; tied regions are joined with a comma.
    pub name: String,
    /// Its faces.
    pub faces: Vec<FaceIdx>,
    /// Its filling at the point.
    pub filling: Rational,
    /// What it is to its device.
    pub kind: RegionKind,
}

/// What a region is to its device.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum RegionKind {
    /// The ungated mesa.
    Bulk,
    /// An overlay with the filling of the ungated mesa.
    LikeBulk,
    /// An overlay with a filling of its own.
    Own,
}

impl FillingRegion {
    /// Whether it is the ungated mesa.
    pub fn is_bulk(&self) -> bool {
        self.kind == RegionKind::Bulk
    }
}

/// A reading as a sum over regions.
#[derive(Clone, Debug, PartialEq)]
pub struct ClosedForm {
    /// (index of the region, a): the reading is Σ a/ν, with |ν| where a filling of the point is negative. No zeros.
    pub terms: Vec<(usize, Rational)>,
}

/// All closed forms of one setting.
pub struct ClosedForms {
    /// Regions with a filling of their own, the bulk last; then those with the bulk's filling; then ties.
    regions: Vec<FillingRegion>,
    own: usize,
    levels: Vec<Level>,
    magnitudes: bool,
    /// The setting itself, where it is none of those that are fitted.
    point: Option<Islands<f64>>,
}

/// One way to name regions: each on its own, or those of one filling tied.
struct Level {
    /// One, or one without mixing over lengths and one with full mixing in its place: both must agree.
    fits: Vec<Fit>,
    /// For every region of the fit its index among all regions.
    regions: Vec<usize>,
    /// 1/|ν| of these at the point.
    inverses: Vec<Rational>,
}

impl ClosedForms {
    /// Fits and verifies on a network in the ordering of a setting. `regions` as from [`filling_regions`].
    ///
    /// Regions of one filling are first told apart: a form that names one of them holds whichever is the larger. What
    /// depends on which is the larger has a form only while they stay tied, and then names them together.
    pub fn of(network: &Network, operating: &Operating, regions: Vec<FillingRegion>) -> Self {
        let magnitudes = regions.iter().any(|region| region.filling.is_negative());
        let (mut regions, own) = own_first(regions);
        let apart: Vec<usize> = (0..regions.len()).collect();
        let tied = ties(&mut regions);
        let ways = if tied.len() < apart.len() { vec![apart, tied] } else { vec![apart] };
        // Edge modes bound no regions: nothing is there to be fitted.
        let settings = if regions.is_empty() { Vec::new() } else { exact_settings(operating) };
        let level = |way: Vec<usize>| {
            let named: Vec<FillingRegion> = way.iter().map(|&at| regions[at].clone()).collect();
            let fillings: Vec<Rational> = named.iter().map(|region| region.filling.clone()).collect();
            let fits: Vec<Fit> =
                settings.iter().map(|setting| Fit::of(network, setting, &named)).collect::<Option<_>>()?;
            (!fits.is_empty()).then(|| Level { fits, regions: way, inverses: inverses(&fillings) })
        };
        let levels = ways.into_iter().filter_map(level).collect();
        let point = match conductance(&channels(network, operating)) {
            Conductance::Float(solved) => Some(Islands::of(&solved)),
            Conductance::Exact(_) => None,
        };
        Self { levels, regions, own, magnitudes, point }
    }

    /// The closed form of a reading, if it has one.
    pub fn form(&self, reading: &Reading) -> Option<ClosedForm> {
        let of = |level: &Level| level.agreed(level.fits.iter().map(|fit| fit.coefficients(reading)));
        self.levels.iter().find_map(|level| Some(level.form(of(level).filter(|a| self.holds(level, a, reading))?)))
    }

    /// The closed forms of many readings of a device with so many contacts.
    pub fn forms(&self, readings: &[&Reading], contacts: usize) -> Vec<Option<ClosedForm>> {
        let many = readings.len() > contacts * contacts;
        let entries = |level: &Level| level.fits.iter().map(|fit| Entries::of(fit, contacts)).collect::<Vec<_>>();
        let first = self.levels.first().filter(|_| many).map(|level| (level, entries(level)));
        let summed = |reading: &Reading| {
            let (level, entries) = first.as_ref()?;
            let found = level.agreed(entries.iter().map(|entries| entries.sum(reading)))?;
            self.holds(level, &found, reading).then(|| level.form(found))
        };
        readings.iter().map(|reading| summed(reading).or_else(|| self.form(reading))).collect()
    }

    /// Whether a form gives the reading at the point, where that was not fitted.
    fn holds(&self, level: &Level, coefficients: &[Rational], reading: &Reading) -> bool {
        let Some(islands) = &self.point else { return true };
        let value = islands.resistance(reading.current, reading.voltage);
        let formed = dot(coefficients, &level.inverses).to_f64();
        value.is_some_and(|value| (value - formed).abs() <= SAME_VALUE * formed.abs().max(1.0))
    }

    /// A closed form in words, such as `1/ν(TG) − 1/ν(bulk)`.
    pub fn words(&self, form: &ClosedForm) -> String {
        words::words(&self.regions, form, if self.magnitudes { ("|ν(", ")|") } else { ("ν(", ")") })
    }

    /// The regions with a filling of their own at the point, in the order in which forms name them, the bulk last.
    pub fn regions(&self) -> &[FillingRegion] {
        &self.regions[..self.own]
    }
}

impl Level {
    /// What all fits say alike.
    fn agreed(&self, mut found: impl Iterator<Item = Option<Vec<Rational>>>) -> Option<Vec<Rational>> {
        let first = found.next()??;
        found.all(|other| other.as_ref() == Some(&first)).then_some(first)
    }

    fn form(&self, coefficients: Vec<Rational>) -> ClosedForm {
        let terms = self.regions.iter().copied().zip(coefficients);
        ClosedForm { terms: terms.filter(|(_, a)| !a.is_zero()).collect() }
    }
}

/// Difference in h/e², of values about 1, that only rounding makes.
const SAME_VALUE: f64 = 1e-9;

/// The setting in fractions; where lengths enter, without mixing over them and with full mixing.
fn exact_settings(operating: &Operating) -> Vec<Operating> {
    let lengths = operating.coupling.iter().any(Coupling::has_length);
    let rules = if lengths { [Mixing::None, Mixing::Full].as_slice() } else { &[Mixing::None] };
    rules.iter().map(|rule| operating.without_lengths(rule)).collect()
}

/// Regions with a filling of their own, then overlays that have the bulk's; and the number of the first.
fn own_first(regions: Vec<FillingRegion>) -> (Vec<FillingRegion>, usize) {
    let (mut own, like_bulk): (Vec<_>, Vec<_>) =
        regions.into_iter().partition(|region| region.kind != RegionKind::LikeBulk);
    let count = own.len();
    own.extend(like_bulk);
    (own, count)
}

/// The regions of every filling as one: its own where it is alone, the bulk where it has the bulk's filling, else a tie
/// that is added to the regions. Gives their indices.
fn ties(regions: &mut Vec<FillingRegion>) -> Vec<usize> {
    let mut tied: Vec<usize> = Vec::new();
    for at in 0..regions.len() {
        let same: Vec<usize> =
            (0..regions.len()).filter(|&other| regions[other].filling == regions[at].filling).collect();
        if tied.iter().any(|&known| regions[known].filling == regions[at].filling) {
            continue;
        }
        let joined = join(regions, &same);
        match same.as_slice() {
            [only] => tied.push(*only),
            _ => {
                tied.push(regions.len());
                regions.push(joined);
            }
        }
    }
    tied
}

/// Named by those with a filling of their own: what is like the bulk goes by the bulk's name.
fn join(regions: &[FillingRegion], same: &[usize]) -> FillingRegion {
    let own = same.iter().map(|&at| &regions[at]).filter(|region| region.kind != RegionKind::LikeBulk);
    let names: Vec<&str> = own.map(|region| region.name.as_str()).collect();
    let faces = same.iter().flat_map(|&at| regions[at].faces.clone()).collect();
    FillingRegion { name: names.join(", "), faces, ..regions[same[0]].clone() }
}

/// The regions of a point: overlays first, in the order of the device file, the bulk last. Regions of filling zero carry
/// nothing and are left out. On a bench those of every device, called `A:TG`.
pub fn filling_regions(network: &Network, device: &Device, point: &OperatingPoint) -> Vec<FillingRegion> {
    let Some(bench) = &device.bench else { return regions_of_one(network, device, point) };
    let mut before = 0;
    let mut regions = Vec::new();
    for ((network, part), point) in network.parts.iter().zip(&bench.parts).zip(&point.parts) {
        for region in regions_of_one(network, &part.device, point) {
            let faces = region.faces.iter().map(|face| FaceIdx(before + face.0)).collect();
            regions.push(FillingRegion { name: joined_name(&part.name, &region.name), faces, ..region });
        }
        before += network.topology.faces.len() - 1;
    }
    regions.sort_by_key(FillingRegion::is_bulk);
    regions
}

fn regions_of_one(network: &Network, device: &Device, point: &OperatingPoint) -> Vec<FillingRegion> {
    let mut regions: Vec<FillingRegion> = Vec::new();
    for (face, cover) in covers(network, point) {
        let Some(filling) = point.filling(&cover).filter(|filling| !filling.is_zero()) else { continue };
        let name = cover_name(device, &cover);
        match regions.iter_mut().find(|region| region.name == name) {
            Some(region) => region.faces.push(face),
            None => {
                let kind = if cover.is_empty() { RegionKind::Bulk } else { RegionKind::Own };
                regions.push(FillingRegion { name, faces: vec![face], filling: filling.clone(), kind });
            }
        }
    }
    let bulk = regions.iter().find(|region| region.is_bulk()).map(|region| region.filling.clone());
    let like_bulk = |region: &&mut FillingRegion| !region.is_bulk() && Some(&region.filling) == bulk.as_ref();
    regions.iter_mut().filter(like_bulk).for_each(|region| region.kind = RegionKind::LikeBulk);
    regions
}

const BULK: &str = "bulk";

/// Every face of the mesa with its cover, gated ones first; a gate that the point does not name counts as bulk.
fn covers(network: &Network, point: &OperatingPoint) -> Vec<(FaceIdx, Vec<OverlayIdx>)> {
    let mut covers: Vec<(FaceIdx, Vec<OverlayIdx>)> = Vec::new();
    for (face, label) in network.topology.faces.iter().enumerate() {
        if let FaceLabel::Mesa(cover) = label {
            let named = point.fillings.iter().any(|(under, _)| under == cover);
            covers.push((FaceIdx(face), if named { cover.clone() } else { Vec::new() }));
        }
    }
    covers.sort_by(|(_, a), (_, b)| (a.is_empty(), a).cmp(&(b.is_empty(), b)));
    covers
}

fn cover_name(device: &Device, cover: &[OverlayIdx]) -> String {
    let names: Vec<&str> = cover.iter().map(|at| device.overlays[at.0].name.as_str()).collect();
    if names.is_empty() { BULK.to_owned() } else { names.join("+") }
}
