//! The potentials of all rack nodes per unit current.

use nalgebra::Complex;
use nalgebra::ComplexField;
use nalgebra::DMatrix;
use nalgebra::DVector;

use crate::circuit::Chip;
use crate::circuit::Circuit;
use crate::circuit::Drive;
use crate::circuit::Taken;
use crate::circuit::equations::Equations;
use crate::circuit::equations::equations;
use crate::cooldown::CurrentDivisor;
use crate::quantity::KLITZING;

/// Below this share of the current that enters, what leaves at the outlet is rounding: no current is measured there.
const NO_CURRENT: f64 = 1e-12;

/// The circuit solved, with a unit current into the inlet's rack node.
pub(super) struct Solution {
    /// Potential of every rack node in h/e²; none for one that hangs free.
    pub rack: Vec<Option<Complex<f64>>>,
    /// Potential of the inlet's rack node in h/e².
    pub inlet: Complex<f64>,
    /// Share of the current that leaves at the outlet.
    pub leaving: Complex<f64>,
}

impl Solution {
    /// Solves; none when no current can enter.
    pub fn of(chip: &Chip, circuit: &Circuit, taken: &Taken) -> Option<Self> {
        let equations = equations(chip, circuit, taken)?;
        let unknowns = unknowns(&equations)?;
        let value = |row: &nalgebra::RowDVector<Complex<f64>>| row.iter().zip(&unknowns).map(|(a, x)| a * x).sum();
        let rack: Vec<Option<Complex<f64>>> = equations.rack.iter().map(|row| row.as_ref().map(value)).collect();
        let inlet = rack[taken.current[0].0]?;
        Some(Self { rack, inlet, leaving: value(&equations.leaving) })
    }

    /// The unit current over the current that divides; none where that one is nothing or is not stated.
    ///
    /// The source is seen from outside: a voltage V behind R_s drives V/(R_s + Z) into the input impedance Z of the rest,
    /// so the nominal V/R_s is too large by 1 + Z/R_s.
    pub fn over_divisor(&self, circuit: &Circuit) -> Option<Complex<f64>> {
        match (circuit.divisor, circuit.drive) {
            (CurrentDivisor::Outlet, _) => {
                (self.leaving.norm_sqr() > NO_CURRENT * NO_CURRENT).then(|| self.leaving.inv())
            }
            (CurrentDivisor::Inlet, _) | (CurrentDivisor::Nominal, Drive::Current { .. }) => Some(Complex::ONE),
            (CurrentDivisor::Nominal, Drive::Voltage { series_ohm, .. }) => {
                let series = series_ohm / KLITZING.value;
                (series > 0.0).then(|| Complex::from(series) / (self.inlet + series))
            }
        }
    }

    /// Size of the current that divides, in A; none where it is not stated.
    pub fn divisor_ampere(&self, circuit: &Circuit) -> Option<f64> {
        let entering = match circuit.drive {
            Drive::Current { ampere } => ampere?,
            Drive::Voltage { volt, series_ohm } => {
                let whole = self.inlet * KLITZING.value + series_ohm;
                volt / libm::hypot(whole.re, whole.im)
            }
        };
        self.over_divisor(circuit).map(|over| (entering / libm::hypot(over.re, over.im)).abs())
    }
}

/// Real where no entry has an imaginary part: the same solution with fewer roundings.
fn unknowns(equations: &Equations) -> Option<Vec<Complex<f64>>> {
    let matrix = &equations.matrix;
    if matrix.iter().any(|entry| entry.im != 0.0) {
        return solve(matrix.clone(), equations.inlet);
    }
    Some(solve(matrix.map(|entry| entry.re), equations.inlet)?.into_iter().map(Complex::from).collect())
}

fn solve<T: ComplexField>(matrix: DMatrix<T>, inlet: usize) -> Option<Vec<T>> {
    let mut unit = DVector::zeros(matrix.nrows());
    unit[inlet] = T::one();
    Some(matrix.lu().solve(&unit)?.iter().cloned().collect())
}
