//! A drawing or chart as a file of its own, with what it shows in the picture's own data.

/// What a picture says of itself.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct PictureData {
    /// Device, operating point, polarity and what is drawn, in one line.
    pub title: String,
    /// What can be read in it.
    pub description: String,
    /// Program and version.
    pub software: String,
    /// The inputs with their checksums.
    pub source: String,
}
