//! Labels: names, pins, gates, filling factors, shares. Each takes the first of its places that is free.

use crate::figure::chip::ChipDrawing;
use crate::figure::chip::OverlayLook;
use crate::figure::chip::area::Area;
use crate::figure::chip::arrows::Arrow;
use crate::figure::chip::bit::Bit;
use crate::figure::chip::chains::Chains;
use crate::figure::chip::obstacles::Obstacles;
use crate::figure::chip::scenery;
use crate::figure::chip::scenery::SYMBOL_MM;
use crate::figure::chip::shares;
use crate::figure::chip::stretch::Frame;
use crate::figure::chip::strokes::Reach;
use crate::figure::chip::style;
use crate::figure::chip::texts::Wording;
use crate::figure::fonts::Face;
use crate::figure::scene::At;
use crate::figure::scene::Mark;

/// Everything that labels speak of or keep clear of.
pub(super) struct Sketch<'a> {
    pub drawing: &'a ChipDrawing<'a>,
    pub contacts: &'a [Area],
    /// Mesa and contacts.
    pub chip: &'a Area,
    pub overlays: &'a [Area],
    pub chains: &'a Chains,
    /// Millimetres per nanometre, where the drawing is to scale.
    pub mm_per_nm: Option<f64>,
    pub channels: Channels,
    pub reaches: &'a [Reach<'a>],
    pub arrows: &'a [Arrow],
    pub height_mm: f64,
}

/// Whether the channels stand on the drawing.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Channels {
    Drawn,
    /// Somewhere lines lie so near to each other that they cross.
    TooNear,
}

/// All labels, and what it costs that some found no free place.
pub(super) struct Labelled {
    pub marks: Vec<Mark>,
    pub lack: usize,
}

/// Cost of a name without a place.
const LACK_OF_NAME: usize = 1000;
/// Cost of a pin without a place: it also stands in the table of contacts.
const LACK_OF_PIN: usize = 10;
/// Cost of a share without a place: the pen shows it too.
pub(super) const LACK_OF_SHARE: usize = 1;

/// Labels while they are placed.
pub(super) struct Placing<'a> {
    pub sketch: &'a Sketch<'a>,
    pub obstacles: Obstacles,
    pub done: Labelled,
    /// Names of contacts, by index, that stand outside their contact.
    named: Vec<(usize, Frame)>,
}

/// Width that a contact needs to hold its name; long names stand beside their contact.
pub(super) fn room_for_name(name: &str) -> f64 {
    let width = name_inside(name).width() + 2.0 * INSIDE_MM;
    if width <= 11.0 { width.max(4.5) } else { 4.5 }
}

/// Dark margin around a name inside its contact, in mm.
const INSIDE_MM: f64 = 0.7;

fn name_inside(name: &str) -> Wording {
    Wording::new(name.to_owned(), Face::Bold, style::NAME_PT, style::LIGHT)
}

fn small(text: String) -> Wording {
    Wording::new(text, Face::Regular, style::SMALL_PT, style::GREY)
}

/// Longest scale bar in mm.
const LONGEST_BAR_MM: f64 = 20.0;

/// The largest length of one, two or five units of a power of ten nanometres that a scale bar may show, and its
/// millimetres.
fn scale_bar(mm_per_nm: f64) -> Option<(u64, f64)> {
    let powers = (0..10).map(|power| 10_u64.pow(power));
    let lengths = powers.flat_map(|power| [1, 2, 5].map(|times| times * power));
    let shown = lengths.map(|nm| (nm, nm as f64 * mm_per_nm)).take_while(|(_, mm)| *mm <= LONGEST_BAR_MM);
    shown.last()
}

/// A length in the largest unit that keeps it whole.
fn length_words(nm: u64) -> String {
    match nm {
        nm if nm % 1_000_000 == 0 => format!("{} mm", nm / 1_000_000),
        nm if nm % 1000 == 0 => format!("{} µm", nm / 1000),
        nm => format!("{nm} nm"),
    }
}

/// Which contacts choose first where their name shall stand.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Order {
    /// Those at the ends, which have fewer places.
    EndsFirst,
    /// Those in the middle.
    MiddleFirst,
}

/// Places all labels of a drawing. Where a name finds no place the contacts choose in the other order.
pub(super) fn labels(sketch: &Sketch<'_>) -> Labelled {
    let first = labels_in_order(sketch, Order::EndsFirst);
    if first.lack < LACK_OF_NAME {
        return first;
    }
    let second = labels_in_order(sketch, Order::MiddleFirst);
    if second.lack < first.lack { second } else { first }
}

/// Places all labels, the indispensable ones first.
fn labels_in_order(sketch: &Sketch<'_>, order: Order) -> Labelled {
    let done = Labelled { marks: Vec::new(), lack: 0 };
    let mut placing = Placing { sketch, obstacles: obstacles(sketch), done, named: Vec::new() };
    placing.symbols();
    placing.contact_names(order);
    placing.fillings();
    placing.overlay_names();
    shares::place(&mut placing);
    placing.pins();
    placing.done
}

fn obstacles(sketch: &Sketch<'_>) -> Obstacles {
    let strokes = sketch.reaches.iter().flat_map(|reach| {
        let half_mm = style::channel_pen(reach.potential, reach.pitch_mm).width_mm / 2.0;
        reach.bits.iter().flat_map(Bit::straightened).map(move |stretch| (stretch, half_mm))
    });
    let arrows = sketch.arrows.iter().map(|arrow| Area { rings: vec![arrow.corners.to_vec()] });
    let boxes = arrows.chain(sketch.contacts.iter().cloned()).filter_map(|area| area.frame()).collect();
    let page = Frame { left: 0.2, top: 0.2, right: sketch.drawing.size_mm.0 - 0.2, bottom: sketch.height_mm - 0.2 };
    Obstacles::new(page, boxes, strokes.chain(borders(sketch)))
}

/// Rims and borders of regions, which no text should touch.
fn borders<'a>(sketch: &'a Sketch<'_>) -> impl Iterator<Item = ((At, At), f64)> + 'a {
    let chains = sketch.chains.all().iter();
    chains.flat_map(|chain| chain.windows(2).map(|pair| ((pair[0], pair[1]), 0.1)).collect::<Vec<_>>())
}

impl Placing<'_> {
    /// The field symbol, the orientation mark and the note on scale, in their corners.
    fn symbols(&mut self) {
        let (width, height) = (self.sketch.drawing.size_mm.0, self.sketch.height_mm);
        let centre = (width - SYMBOL_MM - 0.5, SYMBOL_MM + 0.5);
        let (x, y) = centre;
        let reach = SYMBOL_MM + 0.2;
        self.obstacles.add_box(Frame { left: x - reach, top: y - reach, right: x + reach, bottom: y + reach });
        self.done.marks.extend(scenery::field_symbol(self.sketch.drawing.polarity, centre));
        let corner = Frame { left: 0.5, top: height - 4.5, right: 4.5, bottom: height - 0.5 };
        self.obstacles.add_box(corner);
        self.done.marks.push(scenery::orientation_mark(corner));
        self.scale((width - 0.5, height - 1.6));
    }

    /// A scale bar with its length, or the note that there is no scale; `end` is its right end.
    fn scale(&mut self, end: At) {
        let (words, bar_mm) = match self.sketch.mm_per_nm.and_then(scale_bar) {
            Some((nm, bar_mm)) => (length_words(nm), bar_mm),
            None => ("not to scale".to_owned(), 0.0),
        };
        let words = match self.sketch.channels {
            Channels::Drawn => words,
            Channels::TooNear => format!("channels lie too near to be drawn here; {words}"),
        };
        let note = small(words);
        self.put(&note, (end.0 - note.width() / 2.0, end.1));
        if bar_mm > 0.0 {
            let right = end.0 - note.width() - 1.4;
            self.done.marks.push(scenery::scale_bar((right - bar_mm, end.1), bar_mm));
            self.obstacles.add_stroke((((right - bar_mm, end.1), (right, end.1)), 0.8));
        }
    }

    fn contact_names(&mut self, order: Order) {
        let contacts = self.sketch.contacts;
        let mut outside = Vec::new();
        for (index, contact) in self.sketch.drawing.names.contacts.iter().enumerate() {
            let Some(frame) = contacts[index].frame() else { continue };
            let name = name_inside(&contact.name);
            let smaller = name.in_size(style::SMALL_PT);
            let is_clear = |name: &Wording| !self.obstacles.is_stroked(name.frame(frame.centre()));
            match [name, smaller].into_iter().find(|name| fits(name, &contacts[index], frame) && is_clear(name)) {
                Some(name) => self.done.marks.push(name.mark(frame.centre())),
                None => outside.push((index, frame)),
            }
        }
        let middle = self.sketch.drawing.size_mm.0 / 2.0;
        outside.sort_by(|(_, a), (_, b)| (b.centre().0 - middle).abs().total_cmp(&(a.centre().0 - middle).abs()));
        if order == Order::MiddleFirst {
            outside.reverse();
        }
        for (index, frame) in outside {
            let text = self.sketch.drawing.names.contacts[index].name.clone();
            let name = Wording::new(text, Face::Bold, style::SMALL_PT, style::DARK);
            let taken = self.beside(frame, &name);
            self.done.lack += if taken.is_none() { LACK_OF_NAME } else { 0 };
            self.named.extend(taken.map(|taken| (index, taken)));
        }
    }

    /// Pins stand beside the contact, or beside its name where that stands outside.
    fn pins(&mut self) {
        for (index, contact) in self.sketch.drawing.names.contacts.iter().enumerate() {
            let (Some(frame), Some(pin)) = (self.sketch.contacts[index].frame(), &contact.pin) else { continue };
            let pin = small(pin.clone());
            let name = self.named.iter().find(|(named, _)| *named == index).map(|(_, name)| *name);
            let found = match name {
                Some(name) => self.stacked(name, &pin).or_else(|| self.flanking(frame, &pin)),
                None => self.beside(frame, &pin),
            };
            self.done.lack += if found.is_none() { LACK_OF_PIN } else { 0 };
        }
    }

    /// Names of gates and steps stand beside them, or inside where there is no room around.
    fn overlay_names(&mut self) {
        let overlays = self.sketch.overlays;
        for (area, overlay) in overlays.iter().zip(&self.sketch.drawing.names.overlays) {
            let Some(frame) = area.frame() else { continue };
            let kind = match overlay.look {
                OverlayLook::GateAcross | OverlayLook::Gate => "gate",
                OverlayLook::Step => "step",
            };
            let name = small(format!("{kind} {}", overlay.name));
            if self.beside(frame, &name).is_none() {
                match self.roomiest(area, &name) {
                    Some(at) => self.put(&name, at),
                    None => self.done.lack += LACK_OF_NAME,
                }
            }
        }
    }

    /// Writes a text and keeps its place.
    pub fn put(&mut self, text: &Wording, at: At) {
        self.obstacles.add_box(text.frame(at));
        self.done.marks.push(text.mark(at));
    }
}

fn fits(name: &Wording, area: &Area, frame: Frame) -> bool {
    let wide = name.width() + 2.0 * INSIDE_MM <= frame.width();
    wide && name.height() + 2.0 * INSIDE_MM <= frame.height() && area.holds(frame.centre())
}
