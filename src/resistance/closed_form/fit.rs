//! Fit on one sample more than there are regions, check on twice as many others and on the point itself.

use crate::conductance::conductance;
use crate::device::ContactIdx;
use crate::network::Network;
use crate::network::Operating;
use crate::network::channels;
use crate::number::Rational;
use crate::resistance::Reading;
use crate::resistance::closed_form::FillingRegion;
use crate::resistance::closed_form::samples::sample;
use crate::resistance::closed_form::samples::with_fillings;
use crate::resistance::islands::Islands;

/// Coefficients of R_ir,kr for all contacts i, k of one island, with r its first contact. R_ij,kl is the sum of four of
/// them, so that a long list of readings costs additions only.
pub(super) struct Entries(Vec<Vec<Option<Vec<Rational>>>>);

impl Entries {
    /// All entries of a fit, each verified.
    pub fn of(fit: &Fit, contacts: usize) -> Self {
        let at = ContactIdx;
        let first = |contact| fit.first_together(at(contact));
        let entry = |i: usize, k: usize| match first(i) {
            r if r != first(k) => None,
            r if i == r || k == r => Some(vec![Rational::ZERO; fit.moved.len()]),
            r => fit.coefficients(&Reading::new([at(i), at(r)], [at(k), at(r)])),
        };
        Self((0..contacts).map(|i| (0..contacts).map(|k| entry(i, k)).collect()).collect())
    }

    /// The coefficients of a reading; none where an entry it needs has none, and then the reading itself may still have
    /// some.
    pub fn sum(&self, reading: &Reading) -> Option<Vec<Rational>> {
        let ([i, j], [k, l]) = (reading.current, reading.voltage);
        let entry = |a: ContactIdx, b: ContactIdx| self.0[a.0][b.0].as_ref();
        let (ik, jk, il, jl) = (entry(i, k)?, entry(j, k)?, entry(i, l)?, entry(j, l)?);
        Some((0..ik.len()).map(|at| &(&ik[at] - &jk[at]) - &(&il[at] - &jl[at])).collect())
    }
}

/// Sampled solutions: a first one, one more for each region with its filling moved alone, and those that check.
pub(super) struct Fit {
    first: Sampled,
    moved: Vec<Sampled>,
    checked: Vec<Sampled>,
}

struct Sampled {
    /// 1/|ν| of every region.
    inverses: Vec<Rational>,
    islands: Islands<Rational>,
}

/// Draws of fillings until twice as many differ as there are regions; more draws than this give no others.
const MOST_DRAWS: u64 = 400;

impl Fit {
    /// None where there are too few fillings to check with, and for a setting that is not exact.
    pub fn of(network: &Network, operating: &Operating, regions: &[FillingRegion]) -> Option<Self> {
        let solved = |fillings: &Fillings| sampled(network, &with_fillings(operating, regions, fillings), fillings);
        let checking = checking(regions)?;
        let first = spread(regions);
        let moved = (0..regions.len()).map(|region| moved(&first, region));
        let point: Fillings = regions.iter().map(|region| region.filling.clone()).collect();
        Some(Self {
            first: solved(&first)?,
            moved: moved.map(|fillings| solved(&fillings)).collect::<Option<_>>()?,
            checked: checking.iter().map(solved).chain([sampled(network, operating, &point)]).collect::<Option<_>>()?,
        })
    }

    /// The coefficients of a reading, verified; none where it is no sum of a/|ν|.
    ///
    /// With the filling of region r moved alone, a_r = ΔR/Δ(1/|ν_r|). The first sample and the others then check that
    /// nothing else is in the reading.
    pub fn coefficients(&self, reading: &Reading) -> Option<Vec<Rational>> {
        let first = self.first.value(reading)?;
        let coefficient = |(region, moved): (usize, &Sampled)| {
            let change = &moved.inverses[region] - &self.first.inverses[region];
            Some(&(&moved.value(reading)? - &first) / &change)
        };
        let coefficients: Vec<Rational> = self.moved.iter().enumerate().map(coefficient).collect::<Option<_>>()?;
        let holds = |sample: &Sampled| sample.value(reading) == Some(dot(&coefficients, &sample.inverses));
        [&self.first].into_iter().chain(&self.checked).all(holds).then_some(coefficients)
    }
}

impl Fit {
    /// The first contact of the island on which a contact lies at the point.
    fn first_together(&self, contact: ContactIdx) -> usize {
        let islands = self.checked.last().map(|sample| &sample.islands);
        let together = |other: &usize| islands.is_some_and(|i| i.together(ContactIdx(*other), contact));
        (0..contact.0).find(together).unwrap_or(contact.0)
    }
}

impl Sampled {
    fn value(&self, Reading { current, voltage, .. }: &Reading) -> Option<Rational> {
        let usable = |at: &ContactIdx| self.islands.passes(*at);
        let all = current.iter().chain(voltage).all(usable);
        all.then(|| self.islands.resistance(*current, *voltage)).flatten()
    }
}

/// None for a setting that is not exact.
fn sampled(network: &Network, operating: &Operating, fillings: &[Rational]) -> Option<Sampled> {
    let islands = Islands::of(conductance(&channels(network, operating)).exact()?);
    Some(Sampled { inverses: inverses(fillings), islands })
}

/// A filling for every region.
type Fillings = Vec<Rational>;

/// Fillings in the order of the point, each with room for one more level below the next.
fn spread(regions: &[FillingRegion]) -> Fillings {
    sample(regions, 0).into_iter().map(|filling| &filling + &filling).collect()
}

/// The same with one region holding one level more.
fn moved(fillings: &Fillings, region: usize) -> Fillings {
    let mut moved = fillings.clone();
    let step = if moved[region].is_negative() { -Rational::ONE } else { Rational::ONE };
    moved[region] += &step;
    moved
}

/// Twice as many fillings as there are regions, all different.
fn checking(regions: &[FillingRegion]) -> Option<Vec<Fillings>> {
    let mut found = Vec::<Fillings>::new();
    for round in 1..MOST_DRAWS {
        if found.len() == 2 * regions.len() {
            break;
        }
        let fillings = sample(regions, round);
        if !found.contains(&fillings) {
            found.push(fillings);
        }
    }
    (found.len() == 2 * regions.len()).then_some(found)
}

pub(super) fn inverses(fillings: &[Rational]) -> Vec<Rational> {
    fillings.iter().map(|filling| &Rational::ONE / &filling.abs()).collect()
}

pub(super) fn dot(a: &[Rational], b: &[Rational]) -> Rational {
    a.iter().zip(b).map(|(a, b)| a * b).sum()
}
