//! Reads a chip drawing back: contacts, lines, soft areas and texts of a finished scene, without the program's help.

use edgesheet::figure::fonts;
use edgesheet::figure::scene::At;
use edgesheet::figure::scene::Mark;
use edgesheet::figure::scene::PathMark;
use edgesheet::figure::scene::Role;
use edgesheet::figure::scene::Scene;
use edgesheet::figure::scene::Segment;
use edgesheet::figure::scene::TextMark;

/// A channel line, straightened.
pub struct Line {
    pub points: Vec<At>,
    pub weight: f64,
    pub half_mm: f64,
}

/// What a reader sees.
pub struct Picture {
    pub contacts: Vec<Vec<Vec<At>>>,
    pub lines: Vec<Line>,
    pub areas: Vec<Vec<Vec<At>>>,
    pub texts: Vec<TextMark>,
    pub page: (f64, f64),
}

impl Picture {
    pub fn of(scene: &Scene, contacts: usize) -> Self {
        let mut picture = Self {
            contacts: vec![Vec::new(); contacts],
            lines: Vec::new(),
            areas: Vec::new(),
            texts: Vec::new(),
            page: (scene.width_mm, scene.height_mm),
        };
        for mark in &scene.marks {
            match mark {
                Mark::Text(text) => picture.texts.push(text.clone()),
                Mark::Path(path) => picture.take(path),
            }
        }
        picture
    }

    fn take(&mut self, path: &PathMark) {
        let rings = straightened(&path.segments);
        match path.role {
            Role::Contact(index) => self.contacts[index] = rings,
            Role::MixingBand => self.areas.push(rings),
            Role::Channel { weight } => {
                let half_mm = path.stroke.as_ref().unwrap().width_mm / 2.0;
                self.lines.extend(rings.into_iter().map(|points| Line { points, weight, half_mm }));
            }
            _ => {}
        }
    }

    /// G in e²/h: the sum of the weights that end at a contact times the potentials at which they begin.
    ///
    /// Potentials of lines as combinations of contact potentials are found by going round until they stand still; lines in
    /// a soft area take the weighted mean of those that enter it.
    pub fn conductance(&self) -> Result<Vec<Vec<f64>>, String> {
        let lines: Vec<usize> = (0..self.lines.len()).collect();
        let starts: Vec<Start> = lines.iter().map(|&line| self.start(line)).collect::<Result<_, _>>()?;
        let area: Vec<Option<usize>> = lines.iter().map(|&line| self.area(line)).collect();
        let count = self.contacts.len();
        let mut potentials = vec![vec![0.0; count]; lines.len()];
        for _ in 0..ROUNDS {
            let entering: Vec<Vec<f64>> = starts.iter().map(|start| start.potential(&potentials, count)).collect();
            let before = potentials.clone();
            for &line in &lines {
                potentials[line] = match area[line] {
                    None => entering[line].clone(),
                    Some(own) => self.mean(own, &area, &starts, &entering),
                };
            }
            let change = before.iter().flatten().zip(potentials.iter().flatten()).map(|(a, b)| (a - b).abs());
            if change.fold(0.0, f64::max) < 1e-13 {
                break;
            }
        }
        let mut matrix = vec![vec![0.0; count]; count];
        for &line in &lines {
            let weight = self.lines[line].weight;
            if let Start::Contact(from) = starts[line] {
                matrix[from][from] += weight;
            }
            let end = *self.lines[line].points.last().unwrap();
            let to = self.contact_at(end);
            let goes_on = self.lines.iter().any(|other| other.points[0] == end);
            match to {
                Some(to) => (0..count).for_each(|at| matrix[to][at] -= weight * potentials[line][at]),
                None if goes_on => {}
                None => return Err(format!("a line ends nowhere, at {end:?}")),
            }
        }
        Ok(matrix)
    }

    fn start(&self, line: usize) -> Result<Start, String> {
        let start = self.lines[line].points[0];
        if let Some(contact) = self.contact_at(start) {
            return Ok(Start::Contact(contact));
        }
        let before = self.lines.iter().position(|other| *other.points.last().unwrap() == start);
        before.map(Start::Line).ok_or_else(|| format!("a line begins nowhere, at {start:?}"))
    }

    fn area(&self, line: usize) -> Option<usize> {
        let points = &self.lines[line].points;
        let probes = points.windows(2).map(|pair| ((pair[0].0 + pair[1].0) / 2.0, (pair[0].1 + pair[1].1) / 2.0));
        let probes: Vec<At> = probes.collect();
        (0..self.areas.len()).find(|&area| probes.iter().all(|&probe| winds(&self.areas[area], probe)))
    }

    fn mean(&self, own: usize, area: &[Option<usize>], starts: &[Start], entering: &[Vec<f64>]) -> Vec<f64> {
        let inside = (0..self.lines.len()).filter(|&line| area[line] == Some(own));
        let comes_in = |line: &usize| match starts[*line] {
            Start::Contact(_) => true,
            Start::Line(before) => area[before] != Some(own),
        };
        let feeding: Vec<usize> = inside.filter(comes_in).collect();
        let whole: f64 = feeding.iter().map(|&line| self.lines[line].weight).sum();
        let share = |at: usize| feeding.iter().map(|&line| self.lines[line].weight * entering[line][at]).sum::<f64>();
        (0..self.contacts.len()).map(|at| if whole > 0.0 { share(at) / whole } else { 0.0 }).collect()
    }

    fn contact_at(&self, point: At) -> Option<usize> {
        (0..self.contacts.len()).find(|&contact| holds(&self.contacts[contact], point))
    }

    /// Everything that must not happen on paper.
    pub fn faults(&self) -> Vec<String> {
        let mut faults = self.line_faults();
        let boxes: Vec<Box4> = self.texts.iter().map(text_box).collect();
        for (at, text) in self.texts.iter().enumerate() {
            let word = &text.runs[0].text;
            if text.size_pt < 7.0 {
                faults.push(format!("{word} has {} pt", text.size_pt));
            }
            let own = boxes[at];
            if own.0 < 0.0 || own.1 < 0.0 || own.2 > self.page.0 || own.3 > self.page.1 {
                faults.push(format!("{word} leaves the page"));
            }
            if boxes[..at].iter().any(|other| overlap(own, *other)) {
                faults.push(format!("{word} lies on another text"));
            }
            faults.extend(self.contact_faults(word, own));
            if self.lines.iter().any(|line| stretches(&line.points).any(|side| box_distance(own, side) < line.half_mm))
            {
                faults.push(format!("{word} lies on a channel"));
            }
        }
        faults
    }

    /// A text lies wholly inside one contact or meets none.
    fn contact_faults(&self, word: &str, own: Box4) -> Option<String> {
        let corners = [(own.0, own.1), (own.2, own.1), (own.0, own.3), (own.2, own.3)];
        self.contacts.iter().find_map(|contact| {
            let inside = corners.iter().filter(|&&corner| holds(contact, corner)).count();
            let cut = contact.iter().any(|ring| closed(ring).any(|side| box_distance(own, side) <= 0.0));
            (cut || (inside > 0 && inside < 4)).then(|| format!("{word} is cut by a contact"))
        })
    }

    /// Lines keep about half a pitch apart, everywhere: the heaviest pen is about half a pitch wide where it is drawn, and
    /// the widest pen of a line says what its pitch is. Parts of one line do not count.
    fn line_faults(&self) -> Vec<String> {
        let whole = self.whole_lines();
        let boxes: Vec<Box4> = self.lines.iter().map(|line| bounds(&line.points)).collect();
        let mut faults = Vec::new();
        for (at, line) in self.lines.iter().enumerate() {
            for (other_at, other) in self.lines[..at].iter().enumerate().filter(|(other, _)| whole[*other] != whole[at])
            {
                let limit = (line.half_mm + other.half_mm).max(1.8 * line.half_mm.max(other.half_mm));
                if are_far(boxes[at], boxes[other_at], limit) {
                    continue;
                }
                let distance = nearest(&line.points, &other.points);
                if distance < limit {
                    faults.push(format!("lines {at} and {other_at} are {distance:.3} mm apart, not {limit:.3} mm"));
                }
            }
        }
        faults
    }

    /// For every piece of a line the number of the whole line, found by ends that are one point.
    fn whole_lines(&self) -> Vec<usize> {
        let mut whole: Vec<usize> = (0..self.lines.len()).collect();
        for (at, line) in self.lines.iter().enumerate() {
            for (other, next) in self.lines.iter().enumerate() {
                if line.points.last() == next.points.first() {
                    let (old, new) = (whole[other], whole[at]);
                    whole.iter_mut().filter(|number| **number == old).for_each(|number| *number = new);
                }
            }
        }
        whole
    }
}

/// Rounds after which a mean that goes round and round stands still: every round the rest falls at least by the share
/// that leaves, and no drawn area keeps more than 99 %.
const ROUNDS: usize = 4000;

enum Start {
    Contact(usize),
    Line(usize),
}

impl Start {
    fn potential(&self, potentials: &[Vec<f64>], contacts: usize) -> Vec<f64> {
        match self {
            Start::Contact(contact) => (0..contacts).map(|at| f64::from(u8::from(at == *contact))).collect(),
            Start::Line(before) => potentials[*before].clone(),
        }
    }
}

/// Sub-paths as broken lines; curves become 12 chords.
fn straightened(segments: &[Segment]) -> Vec<Vec<At>> {
    let mut paths: Vec<Vec<At>> = Vec::new();
    for segment in segments {
        match *segment {
            Segment::Move(at) => paths.push(vec![at]),
            Segment::Line(at) => paths.last_mut().unwrap().push(at),
            Segment::Cubic(a, b, end) => {
                let path = paths.last_mut().unwrap();
                let start = *path.last().unwrap();
                path.extend((1..12).map(|step| bezier([start, a, b, end], f64::from(step) / 12.0)));
                path.push(end);
            }
            Segment::Close => {}
        }
    }
    paths
}

/// A point of a cubic curve from its Bernstein polynomials.
fn bezier([p, a, b, q]: [At; 4], t: f64) -> At {
    let s = 1.0 - t;
    let at = |p: f64, a: f64, b: f64, q: f64| s * s * s * p + 3.0 * s * s * t * a + 3.0 * s * t * t * b + t * t * t * q;
    (at(p.0, a.0, b.0, q.0), at(p.1, a.1, b.1, q.1))
}

fn stretches(points: &[At]) -> impl Iterator<Item = (At, At)> + '_ {
    points.windows(2).map(|pair| (pair[0], pair[1]))
}

fn closed(ring: &[At]) -> impl Iterator<Item = (At, At)> + '_ {
    ring.iter().zip(ring.iter().cycle().skip(1)).map(|(a, b)| (*a, *b))
}

/// Times that outlines wind round a point, from the sum of the angles under which their sides are seen.
fn turns(rings: &[Vec<At>], point: At) -> f64 {
    let angle = |(a, b): (At, At)| {
        let (u, v) = ((a.0 - point.0, a.1 - point.1), (b.0 - point.0, b.1 - point.1));
        (u.0 * v.1 - u.1 * v.0).atan2(u.0 * v.0 + u.1 * v.1)
    };
    rings.iter().flat_map(|ring| closed(ring)).map(angle).sum::<f64>() / std::f64::consts::TAU
}

/// Filled by the non-zero rule, as soft areas are.
fn winds(rings: &[Vec<At>], point: At) -> bool {
    turns(rings, point).abs() > 0.5
}

fn holds(rings: &[Vec<At>], point: At) -> bool {
    turns(rings, point).abs() > 0.5
}

/// Left, top, right, bottom.
type Box4 = (f64, f64, f64, f64);

/// From the top of the capitals to a fifth of the size below the base line.
fn text_box(text: &TextMark) -> Box4 {
    let pieces = fonts::pieces(text);
    let left = text.at.0 + pieces[0].x_mm;
    let top = text.at.1 - fonts::cap_height_mm(text.face, text.size_pt);
    let below = 0.2 * text.size_pt * fonts::MM_PER_PT;
    (left, top, left + fonts::width_of(text), text.at.1 + below)
}

fn overlap(a: Box4, b: Box4) -> bool {
    a.0 < b.2 && b.0 < a.2 && a.1 < b.3 && b.1 < a.3
}

/// Distance of a straight stretch from a box up to 1 mm, found at 40 points of the stretch.
fn box_distance(own: Box4, (a, b): (At, At)) -> f64 {
    if are_far(own, bounds(&[a, b]), 1.0) {
        return 1.0;
    }
    let at = |t: f64| (a.0 + (b.0 - a.0) * t, a.1 + (b.1 - a.1) * t);
    let away = |point: At| {
        let x = (own.0 - point.0).max(point.0 - own.2).max(0.0);
        let y = (own.1 - point.1).max(point.1 - own.3).max(0.0);
        x.hypot(y)
    };
    (0..=40).map(|step| away(at(f64::from(step) / 40.0))).fold(f64::INFINITY, f64::min)
}

/// Left, top, right and bottom of a broken line.
fn bounds(points: &[At]) -> Box4 {
    let start = (f64::INFINITY, f64::INFINITY, f64::NEG_INFINITY, f64::NEG_INFINITY);
    points.iter().fold(start, |b, &(x, y)| (b.0.min(x), b.1.min(y), b.2.max(x), b.3.max(y)))
}

/// Whether two boxes lie further apart than a limit.
fn are_far(a: Box4, b: Box4, limit: f64) -> bool {
    a.0 - b.2 > limit || b.0 - a.2 > limit || a.1 - b.3 > limit || b.1 - a.3 > limit
}

fn nearest(a: &[At], b: &[At]) -> f64 {
    let point_to_side = |point: At, (from, to): (At, At)| {
        let along = (to.0 - from.0, to.1 - from.1);
        let square = along.0 * along.0 + along.1 * along.1;
        let t = ((point.0 - from.0) * along.0 + (point.1 - from.1) * along.1) / square.max(1e-30);
        let t = t.clamp(0.0, 1.0);
        (point.0 - from.0 - t * along.0).hypot(point.1 - from.1 - t * along.1)
    };
    let one_way = |points: &[At], line: &[At]| {
        let each = points.iter().flat_map(|&point| stretches(line).map(move |side| point_to_side(point, side)));
        each.fold(f64::INFINITY, f64::min)
    };
    if stretches(a).any(|s| stretches(b).any(|t| cross(s, t))) { 0.0 } else { one_way(a, b).min(one_way(b, a)) }
}

fn cross((a, b): (At, At), (c, d): (At, At)) -> bool {
    let side = |p: At, q: At, r: At| (q.0 - p.0) * (r.1 - p.1) - (q.1 - p.1) * (r.0 - p.0);
    side(a, b, c) * side(a, b, d) < 0.0 && side(c, d, a) * side(c, d, b) < 0.0
}
