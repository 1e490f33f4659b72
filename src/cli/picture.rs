//! Pictures as files: each as SVG and as PNG.

use crate::diagnostic::Diagnostic;
use crate::figure::scene::Scene;
use crate::report::PictureWords;

/// Name and bytes of a file.
pub type Named = (String, Vec<u8>);

/// The two files of a picture.
pub fn files(picture: &PictureWords, scene: &Scene) -> Result<Vec<Named>, Diagnostic> {
    let PictureWords { name, data } = picture;
    let svg = crate::figure::picture_svg(scene, data).into_bytes();
    let png = crate::figure::to_png(scene, data)?;
    Ok(vec![(format!("{name}.svg"), svg), (format!("{name}.png"), png)])
}
