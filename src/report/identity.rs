//! What the sheet is about.

use crate::cooldown::Cooldown;
use crate::device::Device;
use crate::device::OperatingPoint;
use crate::quantity::printed::as_given;
use crate::report::Identity;
use crate::report::Sources;
use crate::report::names;
use crate::report::stated::stated;

/// Device, cooldown and points in the words of the head and foot.
pub fn identity(sources: &Sources) -> Identity {
    let device = sources.device;
    let title: Vec<&str> =
        [device.title.as_str(), device.material.as_str()].into_iter().filter(|t| !t.is_empty()).collect();
    Identity {
        device: device.id.clone(),
        title: title.join(", "),
        lines: lines(sources),
        foot: foot(device, sources.cooldown),
        points: device.points.iter().map(|point| point_line(device, point)).collect(),
        stated: stated(sources),
    }
}

/// `4 over 2: filling 4, 2 under TG, 3.1 T`.
pub fn point_line(device: &Device, point: &OperatingPoint) -> String {
    let fillings = names::fillings(device, point);
    match names::field(point) {
        Some(field) => format!("{}: {fillings}, {field}", point.name),
        None => format!("{}: {fillings}", point.name),
    }
}

fn lines(sources: &Sources) -> Vec<String> {
    let Some(cooldown) = sources.cooldown else { return vec!["expected values, no cooldown".to_string()] };
    let conditions = conditions(sources, cooldown);
    let identity = format!("cooldown {}, revision {}", cooldown.id, cooldown.revision);
    [identity, conditions].into_iter().filter(|line| !line.is_empty()).collect()
}

fn conditions(sources: &Sources, cooldown: &Cooldown) -> String {
    let temperature = cooldown.temperature_k.map(|kelvin| format!("{} K", as_given(kelvin)));
    let electrons = cooldown.electron_temperature_k.map(|kelvin| format!("electrons {} K", as_given(kelvin)));
    let points = match sources.device.points.as_slice() {
        [only] => names::field(only),
        _ => None,
    };
    let parts = [cooldown.date.as_deref().map(date), temperature, electrons, points];
    parts.into_iter().flatten().collect::<Vec<_>>().join(", ")
}

pub(super) fn foot(device: &Device, cooldown: Option<&Cooldown>) -> String {
    match cooldown {
        Some(cooldown) => format!("{} · {} · revision {}", device.id, cooldown.id, cooldown.revision),
        None => format!("{} · expected values", device.id),
    }
}

/// `2026-03-14` as `14 March 2026`; anything else as it was written.
pub(super) fn date(written: &str) -> String {
    const MONTHS: [&str; 12] = [
        "January",
        "February",
        "March",
        "April",
        "May",
        "June",
        "July",
        "August",
        "September",
        "October",
        "November",
        "December",
    ];
    let spelled = || {
        let [year, month, day] = written.split('-').collect::<Vec<_>>().try_into().ok()?;
        let month = MONTHS.get(month.parse::<usize>().ok()?.checked_sub(1)?)?;
        Some(format!("{} {month} {year}", day.parse::<u8>().ok()?))
    };
    spelled().unwrap_or_else(|| written.to_string())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn dates_are_spelled_and_odd_ones_left_alone() {
        assert_eq!(date("2026-03-14"), "14 March 2026");
        for odd in ["2026-13-01", "2026-00-01", "spring", ""] {
            assert_eq!(date(odd), odd);
        }
    }
}
