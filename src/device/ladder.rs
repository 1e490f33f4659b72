//! The ladder: at which fillings a material shows plateaus.

use crate::number::Rational;

/// The fillings at which plateaus stand. Every named ladder holds both signs; filling 0 belongs to all.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub enum Ladder {
    /// Every integer: Landau levels split by spin.
    #[default]
    SpinSplit,
    /// Every even integer: two spins in each Landau level.
    SpinDegenerate,
    /// ±2, ±6, ±10, …: levels of weight 4, the lowest shared by both signs.
    Graphene,
    /// ±4, ±8, ±12, …: levels of weight 4, the lowest of weight 8 shared by both signs.
    BilayerGraphene,
    /// The fillings of a list, in rising order and without 0; it holds only the signs that it names.
    Own(Vec<Rational>),
}

/// Where a filling lies on a ladder.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum LadderPlace {
    /// On a step, or 0.
    Step,
    /// Between two steps of its own sign (0 counts as one), given by |ν|.
    Between {
        /// The step below.
        lower: Rational,
        /// The step above.
        upper: Rational,
    },
    /// Beyond the last step of a list, or of a sign that the list does not hold.
    Beyond,
}

impl Ladder {
    /// Words of the named ladders, as a device file has them.
    pub const NAMES: [&'static str; 4] = ["spin-split", "spin-degenerate", "graphene", "bilayer-graphene"];

    /// The ladder of a name out of [`Ladder::NAMES`].
    pub fn named(name: &str) -> Option<Self> {
        match name {
            "spin-split" => Some(Self::SpinSplit),
            "spin-degenerate" => Some(Self::SpinDegenerate),
            "graphene" => Some(Self::Graphene),
            "bilayer-graphene" => Some(Self::BilayerGraphene),
            _ => None,
        }
    }

    /// Where the (signed) filling lies.
    pub fn place(&self, filling: &Rational) -> LadderPlace {
        let magnitude = filling.abs();
        let lower = self.step_not_above(filling);
        if lower == magnitude {
            return LadderPlace::Step;
        }
        match self.step_above(&lower, filling) {
            Some(upper) => LadderPlace::Between { lower, upper },
            None => LadderPlace::Beyond,
        }
    }

    /// |ν| of all steps with the sign of `sign_of`, outermost channel first.
    pub fn steps(&self, sign_of: &Rational) -> impl Iterator<Item = Rational> {
        std::iter::successors(self.step_above(&Rational::ZERO, sign_of), |from| self.step_above(from, sign_of))
    }

    /// How many steps of the filling's sign are needed to hold it: its channels, counted in ladder steps.
    pub fn steps_up_to(&self, filling: &Rational) -> usize {
        let mut count = 0;
        let mut reached = Rational::ZERO;
        while reached < filling.abs() {
            let Some(next) = self.step_above(&reached, filling) else { break };
            reached = next;
            count += 1;
        }
        count
    }

    /// |ν| of the highest step of the filling's sign that is not above it (0 where there is none).
    fn step_not_above(&self, filling: &Rational) -> Rational {
        let magnitude = filling.abs();
        match self {
            Self::SpinSplit | Self::SpinDegenerate | Self::BilayerGraphene => whole_steps(&magnitude, self.spacing()),
            Self::Graphene if magnitude < Rational::from(2) => Rational::ZERO,
            Self::Graphene => whole_steps(&(&magnitude - &Rational::from(2)), 4) + Rational::from(2),
            Self::Own(list) => {
                steps_of_sign(list, filling).into_iter().rfind(|step| *step <= magnitude).unwrap_or(Rational::ZERO)
            }
        }
    }

    /// |ν| of the next step above the step `from`, on the side of the sign of `sign_of`.
    fn step_above(&self, from: &Rational, sign_of: &Rational) -> Option<Rational> {
        match self {
            Self::Own(list) => steps_of_sign(list, sign_of).into_iter().find(|step| step > from),
            Self::Graphene if from.is_zero() => Some(Rational::from(2)),
            named => Some(from + &Rational::from(named.spacing())),
        }
    }

    /// Distance of neighbouring steps of a named ladder, away from 0.
    fn spacing(&self) -> i64 {
        match self {
            Self::SpinSplit | Self::Own(_) => 1,
            Self::SpinDegenerate => 2,
            Self::Graphene | Self::BilayerGraphene => 4,
        }
    }
}

/// The highest multiple of `spacing` that is not above `magnitude`.
fn whole_steps(magnitude: &Rational, spacing: i64) -> Rational {
    let spacing = Rational::from(spacing);
    (magnitude / &spacing).floor() * spacing
}

/// |step| of the steps with the sign of `filling`, rising.
fn steps_of_sign(list: &[Rational], filling: &Rational) -> Vec<Rational> {
    let same = list.iter().filter(|step| step.is_negative() == filling.is_negative());
    let mut steps: Vec<Rational> = same.map(Rational::abs).collect();
    steps.sort();
    steps
}

#[cfg(test)]
mod tests {
    use super::*;

    fn place(ladder: &Ladder, filling: &str) -> String {
        match ladder.place(&Rational::from_text(filling).unwrap()) {
            LadderPlace::Step => "step".into(),
            LadderPlace::Between { lower, upper } => format!("{lower}..{upper}"),
            LadderPlace::Beyond => "beyond".into(),
        }
    }

    /// Plateau fillings of the four materials: integers in a spin-split layer, even ones without spin splitting,
    /// ±4(n + 1/2) in graphene and ±4(n + 1) in its bilayer (common practice).
    #[test]
    fn named_ladders_hold_their_plateaus_with_both_signs() {
        let (all, even) = (Ladder::SpinSplit, Ladder::SpinDegenerate);
        let (mono, bi) = (Ladder::Graphene, Ladder::BilayerGraphene);
        for (ladder, steps, others) in [
            (&all, vec!["1", "-3", "100", "0"], vec![("5/2", "2..3"), ("-0.5", "0..1")]),
            (&even, vec!["2", "-4", "0"], vec![("3", "2..4"), ("-1", "0..2"), ("7/2", "2..4")]),
            (&mono, vec!["2", "-6", "10", "0"], vec![("1", "0..2"), ("4", "2..6"), ("-7", "6..10")]),
            (&bi, vec!["4", "-8", "12", "0"], vec![("1", "0..4"), ("2", "0..4"), ("-6", "4..8")]),
        ] {
            steps.iter().for_each(|filling| assert_eq!(place(ladder, filling), "step", "{ladder:?} {filling}"));
            others.iter().for_each(|(filling, at)| assert_eq!(place(ladder, filling), *at, "{ladder:?} {filling}"));
        }
    }

    #[test]
    fn an_own_list_ends_and_holds_only_its_signs() {
        let list = ["-2", "1/3", "2/3", "1"].map(|step| Rational::from_text(step).unwrap());
        let ladder = Ladder::Own(list.to_vec());
        let found = ["1/3", "0.5", "1/6", "1.5", "-2", "-1", "-3", "0"].map(|filling| place(&ladder, filling));
        assert_eq!(found, ["step", "1/3..2/3", "0..1/3", "beyond", "step", "0..2", "beyond", "step"]);
    }

    #[test]
    fn channels_are_counted_in_steps() {
        for (ladder, filling, steps) in [
            (Ladder::SpinSplit, 3, 3),
            (Ladder::SpinDegenerate, 4, 2),
            (Ladder::Graphene, -6, 2),
            (Ladder::BilayerGraphene, 8, 2),
            (Ladder::SpinSplit, 0, 0),
        ] {
            assert_eq!(ladder.steps_up_to(&Rational::from(filling)), steps, "{ladder:?} {filling}");
        }
        assert_eq!(Ladder::SpinSplit.steps_up_to(&Rational::from_text("5/2").unwrap()), 3);
    }
}
