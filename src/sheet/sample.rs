//! Hand-made reports for the tests of this room.

use crate::figure::scene::Scene;
use crate::report::CautionLine;
use crate::report::Cell;
use crate::report::DrawingWords;
use crate::report::Identity;
use crate::report::Input;
use crate::report::PointReport;
use crate::report::Printed;
use crate::report::Provenance;
use crate::report::Report;
use crate::report::SmallCell;
use crate::report::SmallTable;
use crate::report::Strip;
use crate::report::TableRow;
use crate::report::VerdictBox;
use crate::report::Words;
use crate::report::marked;

/// What a hand-made report is like.
#[derive(Clone, Copy, Debug)]
pub struct Sample {
    pub points: usize,
    pub readings: usize,
    pub name_letters: usize,
    pub measured: bool,
    pub formulas: bool,
    pub decimals: usize,
}

impl Sample {
    /// A plain measured sheet.
    pub const PLAIN: Self =
        Self { points: 1, readings: 14, name_letters: 1, measured: true, formulas: true, decimals: 4 };

    /// The report.
    pub fn report(self) -> Report {
        let long = |times: usize| "a line of some length that says what holds and what does not ".repeat(times);
        Report {
            format: 1,
            identity: Identity {
                device: "W".repeat(7 * self.name_letters),
                title: long(self.name_letters),
                lines: vec![format!("cooldown {}, revision 2", "c".repeat(6 * self.name_letters)), "0.3 K".to_string()],
                foot: format!("{} · c3 · revision 2", "W".repeat(7 * self.name_letters)),
                points: (0..self.points).map(|index| format!("point {index}: filling 3")).collect(),
                stated: vec![long(1), "gate TG: 6 m⁻² per V".to_string()],
            },
            verdict: VerdictBox {
                result: "disagrees",
                sentence: format!("13 of 14 readings agree. One does not: {} with the field away.", self.name(6)),
                why: vec![long(2), long(3)],
                usable: vec![long(1); 3 * self.points],
                with_care: vec![long(2); self.points],
                not_tested: vec!["reciprocity".to_string()],
                limit: None,
                named: Vec::new(),
            },
            answer_point: self.points - 1,
            points: (0..self.points).map(|index| self.point(index)).collect(),
            field_words: vec![long(4), long(3)],
            rules: vec![long(4); 4],
            limits: vec![long(3); 4],
            contacts: (0..self.points * 6).map(|index| format!("{index}: pin A{index}")).collect(),
            closure: vec![self.small_table(6)],
            instruments: vec![self.small_table(6 * self.points), self.small_table(2)],
            corrections: vec![self.small_table(9); self.points],
            budgets: vec![self.small_table(4); 2],
            notices: vec![long(2); self.points],
            cautions: vec![CautionLine { text: long(3), source: long(1) }; 12],
            provenance: Provenance {
                inputs: vec![Input { name: "n".repeat(90), bytes: 12, sha256: "0f".repeat(32) }; 3],
                program: "edgesheet 0.1.0".to_string(),
                constants: vec![long(1)],
                options: Vec::new(),
                repeat: long(1),
            },
            words: Words::built_in("field").unwrap(),
        }
    }

    /// A pair of empty drawings per point.
    pub fn drawings(self) -> Vec<[Scene; 2]> {
        let empty = Scene { width_mm: 84.0, height_mm: 58.0, marks: Vec::new() };
        vec![[empty.clone(), empty]; self.points]
    }

    fn name(self, index: usize) -> String {
        if self.name_letters == 1 {
            return marked(&format!("R_{{14,{}{}}}", index % 6 + 1, (index + 1) % 6 + 1));
        }
        let name = |letter: &str| letter.repeat(self.name_letters);
        format!("R({}–{}, {}–{})", name("S"), name("D"), name("w"), name("m"))
    }

    fn point(self, index: usize) -> PointReport {
        PointReport {
            title: format!("point {index} {}", "x".repeat(3 * self.name_letters)),
            subtitle: "filling 3 with 1 under TG, 4.14 T".to_string(),
            drawings: ["+", "-"].map(|polarity| self.drawing(polarity)).to_vec(),
            pens: vec![format!("potential of contact {}", "S".repeat(self.name_letters)); 3],
            mixing_key: Some("channels here share one potential".to_string()),
            alone: Vec::new(),
            alone_lines: vec!["TG alone: field toward you".to_string(); self.points],
            alone_table: self.small_table(self.points),
            circuit: self.measured,
            charts: if self.measured && self.readings > 0 { vec![[0, self.readings.min(18)]] } else { Vec::new() },
            chart_notes: vec!["Short line: expected.".to_string()],
            mixing: (self.points > 1).then(|| self.small_table(8)),
            key: vec!["Arrows: sense of the channels.".to_string()],
            readings: format!("{} readings", self.readings),
            measured: self.measured,
            rows: (0..self.readings).map(|index| self.row(index)).collect(),
            notes: vec!["Floating: a voltage contact is not held.".to_string()],
        }
    }

    fn small_table(self, rows: usize) -> SmallTable {
        let number = |value: f64| SmallCell::Number(Printed::number(value, 3, "Ω"));
        let row = |at: usize| {
            let name = SmallCell::text(self.name(at));
            vec![name, number(-12.5 * at as f64), SmallCell::Empty, SmallCell::text("grounded, joined to 4")]
        };
        SmallTable {
            heading: format!("Heading of {}", self.name(1)),
            head: ["reading", "toward, Ω", "away, Ω", "state"].map(str::to_string).to_vec(),
            rows: (0..rows).map(row).collect(),
            notes: vec!["a note of some length that holds for the whole of this table and for no other".to_string()],
        }
    }

    fn drawing(self, polarity: &'static str) -> DrawingWords {
        let name = "S".repeat(self.name_letters);
        DrawingWords {
            polarity,
            heading: "Field toward you".to_string(),
            sense: "electrons run counter-clockwise, holes clockwise".to_string(),
            leads: format!("I {name}→{name}, V {name}−{name}"),
            value: marked("= h/e² × (1/ν_{TG}) = 25.8128 kΩ"),
            expected: None,
            remark: "shows TG alone".to_string(),
            shares: vec!["2/3".to_string()],
            drawn: Vec::new(),
        }
    }

    fn row(self, index: usize) -> TableRow {
        TableRow {
            place: index + 1,
            name: self.name(index),
            label: index.is_multiple_of(3).then(|| format!("diagonal {index}")),
            formula: self.formulas.then(|| marked("2/ν_{bulk} − 1/ν_{TG} | −1/ν_{TG}")),
            toward: self.cell(index),
            away: self.cell(index + 1),
        }
    }

    fn cell(self, index: usize) -> Cell {
        let number = |text: String| Some(Printed { text, value: 0.0, u: None, unit: "kΩ" });
        let digits = "8127012345".chars().cycle().skip(index).take(self.decimals).collect::<String>();
        let expected =
            Cell {
                exact: number("−11/12".to_string()), expected: number(format!("−25.{digits}")), ..Cell::default()
            };
        match (self.measured, index % 7) {
            (_, 5) => Cell { state: Some("floating".to_string()), ..Cell::default() },
            (false, _) => expected,
            (true, case) => Cell {
                measured: number(format!("−25.{digits}(13)")),
                in_u: number(format!("+{case}9.1")),
                in_1e6: number("−12961".to_string()),
                judgement: Some("disagrees".to_string()),
                odd: case == 0,
                strip: Some(Strip { at: 1.0, beyond: number("+9.1".to_string()).filter(|_| case == 0) }),
                ..expected
            },
        }
    }
}
