//! Why a reading is what it is: in sentences, and as a drawing of the channels that make it.

use crate::cli::load::Loaded;
use crate::cli::picture;
use crate::cli::picture::Named;
use crate::cli::point::setup;
use crate::cli::published::size_mm;
use crate::diagnostic::Diagnostic;
use crate::figure::ChipDrawing;
use crate::figure::scene::Scene;
use crate::report;
use crate::report::Beside;
use crate::report::Input;
use crate::report::PictureOrigin;
use crate::report::ReadingWhy;
use crate::report::SolvedPoint;
use crate::resistance::Expected;
use crate::resistance::Prediction;

/// Greatest height of a drawing in which only the channels of one reading are emphasised, in mm.
const HEIGHT_MM: f64 = 58.0;

/// Puts beside every reading of a point why it is what it is.
pub fn explain(loaded: &Loaded, solved: &mut SolvedPoint) -> Result<(), Diagnostic> {
    let rows = 0..solved.prediction.expected.len();
    let all = rows.map(|row| explained(loaded, solved, (&solved.prediction, row)));
    solved.why = all.collect::<Result<_, _>>()?;
    Ok(())
}

/// Why one reading of a prediction at the point is what it is.
pub fn explained(
    loaded: &Loaded,
    solved: &SolvedPoint,
    (prediction, row): (&Prediction, usize),
) -> Result<Option<ReadingWhy>, Diagnostic> {
    let texts = report::Texts::built_in(report::driver(&loaded.device))?;
    let setup = setup(loaded, solved.point, solved.polarity);
    let (device, network) = (&loaded.device, &loaded.network);
    let Some(why) = crate::resistance::why(network, &setup, prediction, row) else { return Ok(None) };
    let source = report::WhySource { device, network, point: solved.point, polarity: solved.polarity };
    let sentences = report::why_sentences(source, &prediction.expected[row], &why, &texts)?;
    Ok(Some(ReadingWhy { why, sentences }))
}

/// The readings that show one region alone at a point, explained and drawn: SVG and PNG.
pub fn isolating(
    loaded: &Loaded,
    (solved, beside): (&SolvedPoint, &Beside),
    origin: &PictureOrigin,
) -> Result<Vec<Named>, Diagnostic> {
    let setup = setup(loaded, solved.point, solved.polarity);
    let mut files = Vec::new();
    for best in beside.isolated.iter().filter_map(|region| region.best.as_ref()) {
        let mut prediction = crate::resistance::predict(&loaded.network, &setup, std::slice::from_ref(&best.reading));
        prediction.expected.iter_mut().for_each(|expected| expected.formula.clone_from(&best.formula));
        let Some(why) = explained(loaded, solved, (&prediction, 0))? else { continue };
        let picture = report::why_picture(&loaded.device, solved, (best, &why), origin);
        files.extend(picture::files(&picture, &draw_why(loaded, solved, (best, &why)))?);
    }
    Ok(files)
}

/// Every explained reading as a picture, SVG and PNG.
pub fn pictures(loaded: &Loaded, solved: &[SolvedPoint]) -> Result<Vec<Named>, Diagnostic> {
    let inputs = loaded.inputs.iter().map(|file| Input::of(&file.name, &file.bytes)).collect();
    let version = env!("CARGO_PKG_VERSION");
    let origin = PictureOrigin::new(&loaded.device, loaded.cooldown.as_ref(), inputs, version)?;
    let mut files = Vec::new();
    for point in solved {
        for (expected, why) in point.prediction.expected.iter().zip(&point.why) {
            let Some(why) = why else { continue };
            let picture = report::why_picture(&loaded.device, point, (expected, why), &origin);
            files.extend(picture::files(&picture, &draw_why(loaded, point, (expected, why)))?);
        }
    }
    Ok(files)
}

/// The chip with the channels that make a reading; all others are thin and grey.
pub fn draw_why(loaded: &Loaded, solved: &SolvedPoint, (expected, why): (&Expected, &ReadingWhy)) -> Scene {
    let operating = crate::network::operating(&loaded.network, &loaded.device, solved.point, solved.polarity);
    let potentials = why.why.potentials(&solved.prediction, expected.reading.current);
    let (width, height) = size_mm(loaded);
    crate::figure::draw_chip(&ChipDrawing {
        names: &report::why_names(&loaded.device, expected, &why.why),
        layout: &loaded.layout,
        channels: &solved.prediction.channels,
        fillings: &operating.fillings,
        polarity: solved.polarity,
        potentials: potentials.as_deref(),
        size_mm: (width, height.min(HEIGHT_MM)),
    })
}
