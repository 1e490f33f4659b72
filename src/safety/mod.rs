//! Cautions chosen by what the files say, each with its source.
//!
//! Owns: [`Caution`]. Takes a device and a cooldown, gives at most twelve cautions, the one on local rules always first.
//! Must never claim to be a risk assessment, nor print a limit whose source was not seen.

use crate::cooldown::Cooldown;
use crate::device::Device;

mod chip;
mod cold;
mod magnet;
mod oxygen;

/// A sheet carries no more than this: a longer list is not read.
const MOST: usize = 12;

/// One caution.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Caution {
    /// What to mind, numbers rounded for print.
    pub text: String,
    /// Where it comes from.
    pub source: &'static str,
    /// The key of a file that called for it; `always` for the one on local rules.
    pub key: &'static str,
}

/// The cautions that the files call for, the gravest first.
pub fn cautions(device: &Device, cooldown: Option<&Cooldown>) -> Vec<Caution> {
    let of_cooldown = |rules: &[fn(&Cooldown) -> Option<Caution>]| -> Vec<Caution> {
        cooldown.into_iter().flat_map(|cooldown| rules.iter().filter_map(|rule| rule(cooldown))).collect()
    };
    let mut cautions = vec![local_rules()];
    cautions.extend(of_cooldown(&[oxygen::helium, oxygen::nitrogen, magnet::stored_energy, magnet::quench]));
    cautions.extend(of_cooldown(&[magnet::static_field]));
    cautions.extend(magnet::implants(device, cooldown));
    cautions.extend(of_cooldown(&[cold::burns]));
    cautions.extend([chip::discharge(device), chip::gate_limits(device)].into_iter().flatten());
    cautions.extend(of_cooldown(&[chip::current, cold::dewars]));
    cautions.truncate(MOST);
    cautions
}

fn local_rules() -> Caution {
    Caution {
        text:
            "Local rules, the site safety officer and licensed practice take precedence; this is not a risk assessment."
                .to_string(),
        source: "rule of this sheet",
        key: "always",
    }
}

#[cfg(test)]
mod tests;
