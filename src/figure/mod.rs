//! Drawings and charts: finished scenes in millimetres, and their SVG.
//!
//! Owns: [`scene`], the chip drawing, text measuring, SVG and PNG. Takes layouts, channels and finished numbers, gives scenes.
//! Must never solve anything or do statistics.

pub mod fonts;
pub mod scene;

mod chart;
mod chip;
mod outlined;
mod picture;
mod png;
mod svg;

pub use chart::Chart;
pub use chart::ChartLevel;
pub use chart::ChartPoint;
pub use chart::ChartReading;
pub use chart::ChartSide;
pub use chart::draw_chart;
pub use chip::ChipDrawing;
pub use chip::ChipNames;
pub use chip::ContactName;
pub use chip::MIXING_AREA;
pub use chip::OverlayLook;
pub use chip::OverlayName;
pub use chip::channel_pen;
pub use chip::draw_chip;
pub use chip::key_pens;
pub use picture::PictureData;
pub use png::to_png;
pub use svg::picture_svg;
pub use svg::to_svg;
