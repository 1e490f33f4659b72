//! Outlines of glyphs, to tell one from another.

/// The outline of a glyph, written out.
pub fn outline_of(program: &[u8], glyph: u16) -> String {
    struct Pen(String);
    impl ttf_parser::OutlineBuilder for Pen {
        fn move_to(&mut self, x: f32, y: f32) {
            self.0 += &format!("m {x} {y} ");
        }
        fn line_to(&mut self, x: f32, y: f32) {
            self.0 += &format!("l {x} {y} ");
        }
        fn quad_to(&mut self, x1: f32, y1: f32, x: f32, y: f32) {
            self.0 += &format!("q {x1} {y1} {x} {y} ");
        }
        fn curve_to(&mut self, x1: f32, y1: f32, x2: f32, y2: f32, x: f32, y: f32) {
            self.0 += &format!("c {x1} {y1} {x2} {y2} {x} {y} ");
        }
        fn close(&mut self) {
            self.0 += "h ";
        }
    }
    let mut pen = Pen(String::new());
    let program = ttf_parser::Face::parse(program, 0).expect("a font");
    program.outline_glyph(ttf_parser::GlyphId(glyph), &mut pen);
    pen.0
}
