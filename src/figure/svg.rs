//! A scene as an SVG 1.1 document: true units, three fixed decimals, nothing that depends on the machine.

use std::fmt::Write;

use crate::figure::fonts::Face;
use crate::figure::fonts::MM_PER_PT;
use crate::figure::fonts::pieces;
use crate::figure::outlined::outlined;
use crate::figure::picture::PictureData;
use crate::figure::scene::At;
use crate::figure::scene::Colour;
use crate::figure::scene::Mark;
use crate::figure::scene::PathMark;
use crate::figure::scene::Scene;
use crate::figure::scene::Segment;
use crate::figure::scene::Stroke;
use crate::figure::scene::TextMark;

/// The document. One user unit is 1 mm; text names the family with a fallback.
pub fn to_svg(scene: &Scene) -> String {
    document(scene, " font-family=\"'Noto Sans', sans-serif\"", "")
}

/// The document as a file of its own: letters as shapes, so that it looks the same where our fonts are not installed, and
/// what it shows in its title, description and metadata (SVG 1.1, chapters 5.4 and 21; terms of the Dublin Core).
pub fn picture_svg(scene: &Scene, data: &PictureData) -> String {
    let attributes = concat!(
        " xmlns:rdf=\"http://www.w3.org/1999/02/22-rdf-syntax-ns#\"",
        " xmlns:dc=\"http://purl.org/dc/elements/1.1/\" stroke-linejoin=\"round\""
    );
    let PictureData { title, description, software, source } = data;
    let terms = [("title", title), ("description", description), ("creator", software), ("source", source)];
    let terms: String =
        terms.iter().map(|(term, text)| format!("<dc:{term}>{}</dc:{term}>\n", escaped(text))).collect();
    let own = format!(
        "<title>{}</title>\n<desc>{}</desc>\n<metadata>\n<rdf:RDF>\n<rdf:Description rdf:about=\"\">\n{terms}\
         </rdf:Description>\n</rdf:RDF>\n</metadata>\n",
        escaped(title),
        escaped(description)
    );
    document(&outlined(scene), attributes, &own)
}

fn document(scene: &Scene, attributes: &str, own: &str) -> String {
    let (width, height) = (fixed(scene.width_mm), fixed(scene.height_mm));
    let mut svg = String::from("<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n");
    let size = format!("width=\"{width}mm\" height=\"{height}mm\" viewBox=\"0 0 {width} {height}\"");
    line(&mut svg, &format!("<svg xmlns=\"http://www.w3.org/2000/svg\" version=\"1.1\" {size}{attributes}>"));
    svg.push_str(own);
    for mark in &scene.marks {
        match mark {
            Mark::Path(mark) => path(&mut svg, mark),
            Mark::Text(mark) => text(&mut svg, mark),
        }
    }
    svg.push_str("</svg>\n");
    svg
}

fn line(svg: &mut String, text: &str) {
    svg.push_str(text);
    svg.push('\n');
}

fn path(svg: &mut String, mark: &PathMark) {
    let fill = mark.fill.map_or_else(|| "none".to_owned(), hex);
    let stroke = mark.stroke.as_ref().map(pen).unwrap_or_default();
    if !mark.segments.is_empty() {
        line(svg, &format!("<path d=\"{}\" fill=\"{fill}\"{stroke}/>", movements(&mark.segments)));
    }
}

fn movements(segments: &[Segment]) -> String {
    let movement = |segment: &Segment| match *segment {
        Segment::Move(at) => format!("M{}", point(at)),
        Segment::Line(at) => format!("L{}", point(at)),
        Segment::Cubic(first, second, at) => format!("C{} {} {}", point(first), point(second), point(at)),
        Segment::Close => "Z".to_owned(),
    };
    segments.iter().map(movement).collect::<Vec<_>>().join(" ")
}

fn pen(stroke: &Stroke) -> String {
    let mut attributes = format!(" stroke=\"{}\" stroke-width=\"{}\"", hex(stroke.colour), fixed(stroke.width_mm));
    if !stroke.dash_mm.is_empty() {
        let dashes: Vec<String> = stroke.dash_mm.iter().map(|&mm| fixed(mm)).collect();
        // Writing to a String cannot fail.
        let _ = write!(attributes, " stroke-dasharray=\"{}\"", dashes.join(" "));
    }
    attributes
}

/// Every stretch of a text stands at its own place, so that another font cannot shift what follows.
fn text(svg: &mut String, mark: &TextMark) {
    for piece in pieces(mark) {
        let (x, y) = (fixed(mark.at.0 + piece.x_mm), fixed(mark.at.1 - piece.rise_mm));
        let size = fixed(piece.size_pt * MM_PER_PT);
        let look = format!("font-size=\"{size}\"{} fill=\"{}\"", face(mark.face), hex(mark.colour));
        line(svg, &format!("<text x=\"{x}\" y=\"{y}\" {look} xml:space=\"preserve\">{}</text>", escaped(&piece.text)));
    }
}

fn face(face: Face) -> &'static str {
    match face {
        Face::Regular => "",
        Face::Bold => " font-weight=\"bold\"",
        Face::Italic => " font-style=\"italic\"",
        Face::BoldItalic => " font-weight=\"bold\" font-style=\"italic\"",
    }
}

fn point(at: At) -> String {
    format!("{},{}", fixed(at.0), fixed(at.1))
}

/// Three decimals: a thousandth of a millimetre. Negative zero is written as zero.
fn fixed(value: f64) -> String {
    let text = format!("{value:.3}");
    if text == "-0.000" { "0.000".to_owned() } else { text }
}

fn hex(Colour(red, green, blue): Colour) -> String {
    format!("#{red:02x}{green:02x}{blue:02x}")
}

fn escaped(text: &str) -> String {
    text.replace('&', "&amp;").replace('<', "&lt;").replace('>', "&gt;").replace('"', "&quot;")
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::figure::scene::Anchor;
    use crate::figure::scene::Level;
    use crate::figure::scene::Role;
    use crate::figure::scene::Run;

    fn scene(marks: Vec<Mark>) -> Scene {
        Scene { width_mm: 20.0, height_mm: 10.0, marks }
    }

    fn label(text: &str) -> Mark {
        Mark::Text(TextMark {
            at: (1.0, 2.0),
            anchor: Anchor::Start,
            size_pt: 72.0,
            face: Face::Bold,
            colour: Colour(0, 0, 0),
            runs: vec![Run { text: text.to_owned(), level: Level::Normal }],
            role: Role::Label,
        })
    }

    /// Written by hand after SVG 1.1 (W3C Recommendation, second edition, 2011): chapters 7 (units), 8 (paths), 11 (pens).
    #[test]
    fn a_path_is_written_with_true_units_and_three_decimals() {
        let mark = PathMark {
            segments: vec![
                Segment::Move((0.0, -0.0001)),
                Segment::Line((1.0, 2.5)),
                Segment::Cubic((1.0, 3.0), (2.0, 3.0), (2.0, 2.0004)),
                Segment::Close,
            ],
            stroke: Some(Stroke { colour: Colour(213, 94, 0), width_mm: 0.25, dash_mm: vec![1.0, 0.5] }),
            fill: None,
            role: Role::Plain,
        };
        let expected = concat!(
            "<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n",
            "<svg xmlns=\"http://www.w3.org/2000/svg\" version=\"1.1\" width=\"20.000mm\" height=\"10.000mm\" ",
            "viewBox=\"0 0 20.000 10.000\" font-family=\"'Noto Sans', sans-serif\">\n",
            "<path d=\"M0.000,0.000 L1.000,2.500 C1.000,3.000 2.000,3.000 2.000,2.000 Z\" fill=\"none\" ",
            "stroke=\"#d55e00\" stroke-width=\"0.250\" stroke-dasharray=\"1.000 0.500\"/>\n",
            "</svg>\n"
        );
        assert_eq!(to_svg(&scene(vec![Mark::Path(mark)])), expected);
    }

    /// 72 pt are 25.4 mm; & < > " must be references inside a document (XML 1.0, 2.4).
    #[test]
    fn text_is_escaped_and_sized_in_millimetres() {
        let svg = to_svg(&scene(vec![label("a<b>&\"")]));
        assert!(svg.contains("font-size=\"25.400\" font-weight=\"bold\""), "{svg}");
        assert!(svg.contains(">a&lt;b&gt;&amp;&quot;</text>"), "{svg}");
        assert!(svg.contains("x=\"1.000\" y=\"2.000\""), "{svg}");
    }
}
