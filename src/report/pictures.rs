//! What every picture of a sheet is called and says of itself.

use crate::cooldown::Cooldown;
use crate::device::Device;
use crate::diagnostic::Diagnostic;
use crate::figure::PictureData;
use crate::report::Input;
use crate::report::PointReport;
use crate::report::ReadingWhy;
use crate::report::Report;
use crate::report::SolvedPoint;
use crate::report::Texts;
use crate::report::closing;
use crate::report::file_names::legible;
use crate::report::identity;
use crate::report::marks::plain;
use crate::report::names;
use crate::resistance::Expected;

/// A picture's name (without ending) and its data.
#[derive(Clone, Debug, PartialEq)]
pub struct PictureWords {
    /// Unique among the pictures of a sheet.
    pub name: String,
    /// What it says of itself.
    pub data: PictureData,
}

/// For every point its two drawings, then its charts.
pub fn pictures(report: &Report) -> Vec<PictureWords> {
    let points = report.points.iter().enumerate();
    points.flat_map(|(at, point)| of_point(report, at, point)).collect()
}

fn of_point(report: &Report, at: usize, point: &PointReport) -> Vec<PictureWords> {
    let begin = format!("{}_{}", at + 1, legible(&point.title));
    let origin = PictureOrigin::of(report);
    let picture = |(name, title, lines): (String, String, Vec<String>)| PictureWords {
        name: format!("{begin}_{name}"),
        data: origin.data(&format!("{}, {title}", point.title), &[vec![point.subtitle.clone()], lines].concat()),
    };
    let drawings = point.drawings.iter().map(|drawing| {
        let caption = format!("{} {}", drawing.leads, drawing.value);
        let words = vec![drawing.sense.clone(), caption, drawing.remark.clone()];
        (format!("channels_{}", side(drawing.polarity)), drawing.heading.clone(), words)
    });
    let charts = point.charts.iter().enumerate().map(|(at, [first, count])| {
        let title = format!("{}, {} to {}", report.words.expected_and_measured, first + 1, first + count);
        (format!("chart_{}", at + 1), title, point.chart_notes.clone())
    });
    drawings.chain(charts).map(picture).collect()
}

/// Where a picture comes from.
#[derive(Clone, Debug, PartialEq)]
pub struct PictureOrigin {
    /// Device and, where there is one, cooldown with revision.
    pub about: String,
    /// Program and version.
    pub program: String,
    /// The inputs with their checksums.
    pub inputs: Vec<Input>,
}

impl PictureOrigin {
    /// That of a picture made without a sheet. A fault means that a template part cannot be filled.
    pub fn new(
        device: &Device,
        cooldown: Option<&Cooldown>,
        inputs: Vec<Input>,
        version: &str,
    ) -> Result<Self, Diagnostic> {
        let program = closing::program(version, &Texts::built_in(names::driver(device))?)?;
        Ok(Self { about: identity::foot(device, cooldown), program, inputs })
    }

    /// That of a picture made with a sheet.
    pub fn of(report: &Report) -> Self {
        Self {
            about: report.identity.foot.clone(),
            program: report.provenance.program.clone(),
            inputs: report.provenance.inputs.clone(),
        }
    }

    fn data(&self, title: &str, lines: &[String]) -> PictureData {
        let line = |input: &Input| format!("{} SHA-256 {}", input.name, input.sha256);
        let inputs: Vec<String> = self.inputs.iter().map(line).collect();
        let lines: Vec<String> = lines.iter().map(|line| plain(line)).collect();
        let lines: Vec<&str> = lines.iter().map(|line| line.trim()).filter(|line| !line.is_empty()).collect();
        PictureData {
            title: plain(&format!("{}, {title}", self.about)),
            description: lines.join("\n"),
            software: self.program.clone(),
            source: inputs.join("\n"),
        }
    }
}

/// The picture that explains a reading of a point that was solved.
pub fn why_picture(
    device: &Device,
    solved: &SolvedPoint,
    (expected, why): (&Expected, &ReadingWhy),
    origin: &PictureOrigin,
) -> PictureWords {
    let place = device.points.iter().position(|point| point == solved.point).unwrap_or_default() + 1;
    let leads = names::leads(device, &expected.reading);
    let contacts = [expected.reading.current, expected.reading.voltage].concat();
    let reading: Vec<String> = contacts.iter().map(|contact| legible(names::contact_name(device, *contact))).collect();
    let (point, polarity) = (&solved.point.name, side(solved.polarity.sign()));
    let name = format!("{place}_{}_why_{}_{polarity}", legible(point), reading.join("-"));
    let title = format!("{point}, {}: why {leads}", names::side(device, solved.polarity));
    PictureWords { name, data: origin.data(&title, &why.sentences) }
}

fn side(polarity: &str) -> &'static str {
    if polarity == "+" { "toward" } else { "away" }
}
