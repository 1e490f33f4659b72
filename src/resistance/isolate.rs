//! Which readings show one region alone.

use crate::device::ContactIdx;
use crate::device::Mixing;
use crate::network::Network;
use crate::number::Rational;
use crate::resistance::ClosedForm;
use crate::resistance::ClosedForms;
use crate::resistance::Reading;
use crate::resistance::Setup;
use crate::resistance::every_reading;
use crate::resistance::predict;
use crate::resistance::readings_with;
use crate::resistance::standard_readings;

/// A reading whose closed form has one region only.
#[derive(Clone, Debug, PartialEq)]
pub struct Isolating {
    /// The reading.
    pub reading: Reading,
    /// Its closed form.
    pub form: ClosedForm,
    /// Its value in h/e² at the point: that of its closed form, which is exact.
    pub exact: Rational,
    /// Sum of the changes in h/e² when one contact after the other loses a tenth of its transmission.
    pub contact_error: Rational,
}

/// Which readings are tried.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Candidates {
    /// Every current pair with every voltage pair.
    Every,
    /// Only those with these current leads: the number of all readings grows with the fourth power of the number of
    /// contacts, and on a device with many of them nobody moves the current leads for a check at the start.
    WithCurrent([ContactIdx; 2]),
}

/// Up to this many contacts every reading is tried where nothing else is asked for: 4356 readings.
const MOST_CONTACTS: usize = 12;

impl Candidates {
    /// Every reading on a small device, those with the usual current leads on a large one.
    pub fn usual(contacts: usize, current: [ContactIdx; 2]) -> Self {
        if contacts <= MOST_CONTACTS { Self::Every } else { Self::WithCurrent(current) }
    }

    fn readings(self, contacts: usize) -> Vec<Reading> {
        match self {
            Self::Every => every_reading(contacts),
            Self::WithCurrent(current) => readings_with(contacts, current),
        }
    }
}

/// All readings that show region `region` (an index into [`ClosedForms::regions`]) alone, best first: four distinct
/// contacts before shared ones (no line resistance in the reading); then by signal; then by insensitivity to imperfect
/// contacts; then those that leave the usual current leads where they are; then in the order of the device file. A
/// reading that needs an open contact is none.
pub fn isolating(
    network: &Network,
    setup: &Setup,
    forms: &ClosedForms,
    (region, candidates): (usize, Candidates),
) -> Vec<Isolating> {
    let connected = |reading: &Reading| !reading.current.iter().chain(&reading.voltage).any(|at| setup.is_open(*at));
    let tried: Vec<Reading> = candidates.readings(network.contacts).into_iter().filter(connected).collect();
    let forms = forms.forms(&tried.iter().collect::<Vec<_>>(), network.contacts);
    let alone = |form: &ClosedForm| matches!(form.terms.as_slice(), [(only, _)] if *only == region);
    let (readings, found): (Vec<Reading>, Vec<ClosedForm>) =
        tried.into_iter().zip(forms).filter_map(|(reading, form)| Some((reading, form.filter(alone)?))).unzip();
    // The ranking is of the device itself; no circuit is solved for it. What shows one region alone does so with any
    // mixing length, so that the exact solution without mixing over lengths ranks it.
    let setup = Setup { circuit: None, operating: setup.operating.without_lengths(&Mixing::None) };
    let ideal = values(network, &setup, &readings);
    let errors = contact_errors(network, &setup, (&readings, &ideal));
    let all = readings.into_iter().zip(found).zip(ideal).zip(errors);
    let mut list: Vec<Isolating> = all
        .filter_map(|(((reading, form), exact), contact_error)| {
            Some(Isolating { reading, form, exact: exact?, contact_error })
        })
        .collect();
    let usual = standard_readings(network).first().map(|reading| reading.current);
    list.sort_by_key(|entry| rank(entry, usual));
    list
}

fn rank(entry: &Isolating, usual: Option<[ContactIdx; 2]>) -> impl Ord + use<> {
    let moved = Some(entry.reading.current) != usual;
    (shared_contacts(&entry.reading), -entry.exact.abs(), entry.contact_error.clone(), moved, entry.reading.clone())
}

fn shared_contacts(reading: &Reading) -> usize {
    reading.voltage.iter().filter(|contact| reading.current.contains(contact)).count()
}

fn values(network: &Network, setup: &Setup, readings: &[Reading]) -> Vec<Option<Rational>> {
    predict(network, setup, readings).expected.into_iter().map(|expected| expected.exact).collect()
}

fn contact_errors(
    network: &Network,
    setup: &Setup,
    (readings, ideal): (&[Reading], &[Option<Rational>]),
) -> Vec<Rational> {
    let mut sums = vec![Rational::ZERO; readings.len()];
    for contact in 0..network.contacts {
        let spoilt = values(network, &with_poor_contact(setup, contact), readings);
        for ((sum, ideal), spoilt) in sums.iter_mut().zip(ideal).zip(spoilt) {
            if let (Some(ideal), Some(spoilt)) = (ideal, spoilt) {
                *sum += &(ideal - &spoilt).abs();
            }
        }
    }
    sums
}

fn with_poor_contact(setup: &Setup, contact: usize) -> Setup {
    let mut changed = setup.clone();
    let tenth = Rational::fraction(9, 10).unwrap_or_default();
    changed.operating.transmission[contact].iter_mut().for_each(|t| *t = &*t * &tenth);
    changed
}
