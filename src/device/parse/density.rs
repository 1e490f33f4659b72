//! Density against field and filling, and voltages against their limits: notices, never faults.

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::number::Rational;
use crate::quantity::ELEMENTARY_CHARGE;
use crate::quantity::KLITZING;
use crate::syntax::quoted;

use crate::device::Device;
use crate::device::Drive;
use crate::device::Ladder;
use crate::device::LadderPlace;
use crate::device::OperatingPoint;
use crate::device::OverlayIdx;

pub(super) fn compare(device: &Device, findings: &mut Findings) {
    for point in &device.points {
        findings.extend(bulk(device, point));
        for (gate, volts) in &point.gates_v {
            findings.extend(under_gate(device, point, (*gate, *volts)));
            findings.extend(beyond_limits(device, point, (*gate, *volts)));
        }
    }
}

fn bulk(device: &Device, point: &OperatingPoint) -> Option<Diagnostic> {
    let density = device.layer.density_per_m2?;
    against_filling(device, point, ("the layer", density, &point.bulk))
}

/// The gated density is that of the layer and its change with the voltage from `zero_V`.
fn under_gate(device: &Device, point: &OperatingPoint, (gate, volts): (OverlayIdx, f64)) -> Option<Diagnostic> {
    let overlay = device.overlays.get(gate.0)?;
    let change = overlay.density_per_m2_per_v? * (volts - overlay.zero_v?);
    let density = device.layer.density_per_m2? + change;
    let what = format!("the layer under {}", quoted(&overlay.name));
    against_filling(device, point, (&what, density, point.filling(&[gate])?))
}

/// The filling factor is ν = n h/(e B), the number of carriers per flux quantum h/e, with h/e = (h/e²) e; source: its
/// definition (common practice). A notice comes where another step of the ladder lies nearer than the one stated. `n`
/// counts the carriers of the layer, so a negative one stands for carriers of the other sign.
fn against_filling(
    device: &Device,
    point: &OperatingPoint,
    (what, density, stated): (&str, f64, &Rational),
) -> Option<Diagnostic> {
    let field = point.field_t.filter(|_| device.driven_by == Drive::Field && point.modes.is_none())?;
    let carrier = if point.bulk.is_negative() { -1.0 } else { 1.0 };
    let filling = carrier * density * KLITZING.value * ELEMENTARY_CHARGE.value / field;
    let nearest = nearest_step(&device.ladder, filling)?;
    (!steps_at(&device.ladder, stated).contains(&nearest)).then(|| {
        let message = format!(
            "the density of {what} makes the filling {filling:.2} at {field} T, nearer to {nearest} than to {stated}"
        );
        Diagnostic::notice("density-against-filling", message)
            .at(&point.place)
            .hint("ν = n h/(e B): check the densities, `field_T` and the filling")
    })
}

/// The step that a filling is, or the two steps around it.
fn steps_at(ladder: &Ladder, stated: &Rational) -> Vec<f64> {
    match ladder.place(stated) {
        LadderPlace::Between { lower, upper } => {
            [lower, upper].map(|step| step.to_f64().copysign(stated.to_f64())).to_vec()
        }
        _ => vec![stated.to_f64()],
    }
}

/// The step that lies nearest to a filling; none beyond the last step of a list.
fn nearest_step(ladder: &Ladder, filling: f64) -> Option<f64> {
    let thousandths = (filling * 1000.0).clamp(-1e12, 1e12) as i64;
    let exact = Rational::fraction(thousandths, 1000)?;
    match ladder.place(&exact) {
        LadderPlace::Step => Some(exact.to_f64()),
        LadderPlace::Between { lower, upper } => {
            let (lower, upper) = (lower.to_f64(), upper.to_f64());
            let nearest = if filling.abs() - lower < upper - filling.abs() { lower } else { upper };
            Some(nearest.copysign(filling))
        }
        LadderPlace::Beyond => None,
    }
}

fn beyond_limits(device: &Device, point: &OperatingPoint, (gate, volts): (OverlayIdx, f64)) -> Option<Diagnostic> {
    let overlay = device.overlays.get(gate.0)?;
    let (low, high) = overlay.limits_v?;
    let message = format!("{volts} V on {} lies outside its limits {low} V to {high} V", quoted(&overlay.name));
    let outside = volts < low || volts > high;
    outside
        .then(|| Diagnostic::notice("beyond-limits", message).at(&point.place).hint("check `gates_V` and `limits_V`"))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_nearest_step_keeps_the_sign() {
        for (ladder, filling, nearest) in [
            (Ladder::SpinSplit, 3.3, Some(3.0)),
            (Ladder::SpinSplit, -2.6, Some(-3.0)),
            (Ladder::Graphene, -3.9, Some(-2.0)),
            (Ladder::Own(vec![Rational::ONE]), 0.7, Some(1.0)),
            (Ladder::Own(vec![Rational::ONE]), 1.4, None),
        ] {
            assert_eq!(nearest_step(&ladder, filling), nearest, "{ladder:?} {filling}");
        }
    }
}
