//! Keys of the device file.

use crate::syntax::keys::FileSpec;
use crate::syntax::keys::Key;
use crate::syntax::keys::Kind;
use crate::syntax::keys::Range;
use crate::syntax::keys::TableSpec;

/// The device file.
pub static DEVICE_FILE: FileSpec = FileSpec { what: "device file", root: &ROOT };

/// Words for the ladders with a name.
const LADDERS: &[&str] = &["spin-split", "spin-degenerate", "graphene", "bilayer-graphene"];

static ROOT: TableSpec = TableSpec {
    name: "",
    keys: &[
        Key::new("format", Kind::Count(1), "version of this file format, 1").required(),
        Key::new("device", Kind::One(&DEVICE), "what the device is").required(),
        Key::new("layer", Kind::One(&LAYER), "what is known of the ungated layer").alone(),
        Key::new("mesa", Kind::One(&MESA), "shape of the mesa").required().alone(),
        Key::new("edge", Kind::One(&EDGE), "mixing of channels that run side by side").alone(),
        Key::new("contact", Kind::Many(&CONTACT), "a contact; at least two are needed").required().alone(),
        Key::new("gate", Kind::Many(&GATE), "a gate, with a filling under it at every point").alone(),
        Key::new("step", Kind::Many(&STEP), "a part of the layer with a filling of its own and no gate").alone(),
        Key::new("point", Kind::Many(&POINT), "an operating point; at least one is needed").required().alone(),
        Key::new("reading", Kind::Many(&READING), "a reading to print; without any a standard set is chosen"),
        Key::new("bench", Kind::One(&BENCH), "devices with files of their own, in place of a mesa"),
        Key::new("link", Kind::Many(&LINK), "a wire between contacts of a bench"),
    ],
};

static DEVICE: TableSpec = TableSpec {
    name: "device",
    keys: &[
        Key::new("id", Kind::Name, "identity, as the cooldown file names it").required(),
        Key::new("title", Kind::Text, "title line of the sheet"),
        Key::new("material", Kind::Text, "material, as the sheet shall print it"),
        Key::new("ladder", Kind::WordOrFillings(LADDERS), "fillings at which plateaus stand").default("\"spin-split\""),
    ],
};

static LAYER: TableSpec = TableSpec {
    name: "layer",
    keys: &[
        Key::new("density_per_m2", Kind::Number(Range::Positive), "sheet density of the ungated layer"),
        Key::new("mobility_m2_per_Vs", Kind::Number(Range::Positive), "mobility of the ungated layer"),
    ],
};

static MESA: TableSpec = TableSpec {
    name: "mesa",
    keys: &[
        Key::new("shape", Kind::Word(&["bar", "cross", "ring", "outline"]), "bar, cross, ring or outline").required(),
        Key::new("length_um", Kind::Length(Range::Positive), "bar: extent along x, from 0 at the left end"),
        Key::new("width_um", Kind::Length(Range::Positive), "bar: extent along y, from 0 at the lower edge"),
        Key::new(
            "arm_length_um",
            Kind::Length(Range::Positive),
            "cross: length of each arm, from the square in the middle; x and y from 0 at the ends of the left and lower arm",
        ),
        Key::new("arm_width_um", Kind::Length(Range::Positive), "cross: width of each arm"),
        Key::new(
            "outer_diameter_um",
            Kind::Length(Range::Positive),
            "ring: outer diameter; x and y from 0 in the centre",
        ),
        Key::new("inner_diameter_um", Kind::Length(Range::Positive), "ring: diameter of the opening"),
        Key::new("outline_um", Kind::Outline, "outline: corners [x, y] in order, in either sense"),
        Key::new("cutouts_um", Kind::Outlines, "outline: openings in the mesa, each as its corners in order"),
        Key::new("snap_nm", Kind::Length(Range::Positive), "corners and edges nearer than this are one").default("10"),
    ],
};

static EDGE: TableSpec = TableSpec {
    name: "edge",
    keys: &[
        Key::new("mixing", Kind::Mixing, "between channels side by side along the rim").default("\"none\""),
        Key::new("interface_mixing", Kind::Mixing, "along borders between regions of one sign").default("\"none\""),
        Key::new("opposite_mixing", Kind::Mixing, "along borders between opposite signs").default("\"full\""),
        Key::new("groups", Kind::Groups, "ladder steps that mix with one another, 1 outermost"),
        Key::new("group_mixing", Kind::Mixing, "mixing between groups").default("\"none\""),
        Key::new("driven_by", Kind::Word(&["field", "magnetisation"]), "what turns the channels").default("\"field\""),
    ],
};

static CONTACT: TableSpec = TableSpec {
    name: "contact",
    keys: &[
        Key::new("name", Kind::Name, "name of the contact").required(),
        Key::new(
            "edge",
            Kind::Word(&["left", "top", "right", "bottom", "outer", "inner"]),
            "edge it sits on: left, top, right, bottom of a bar or cross; outer, inner of a ring",
        ),
        Key::new("x_um", Kind::Length(Range::Any), "its centre along the top or bottom edge"),
        Key::new("y_um", Kind::Length(Range::Any), "its centre along the left or right edge"),
        Key::new(
            "width_um",
            Kind::Length(Range::Positive),
            "its width along the edge or rim, round corners of the rim too",
        ),
        Key::new("arm_um", Kind::Length(Range::NotNegative), "bar and cross: length of the arm that carries it")
            .default("0"),
        Key::new("outline_um", Kind::Outline, "any shape anywhere: corners [x, y] in order"),
        Key::new("at_um", Kind::Corner, "outline: the point of a rim, outer or of a cut-out, where its middle sits"),
        Key::new(
            "angle_deg",
            Kind::Number(Range::Any),
            "ring: direction of its middle from the centre, anticlockwise from the x axis",
        ),
        Key::new("pin", Kind::Name, "carrier pin"),
        Key::new("pad", Kind::Text, "chip pad"),
        Key::new("note", Kind::Text, "free text"),
        Key::new("transmission", Kind::Shares, "share of each channel that enters, outermost first").default("1"),
    ],
};

/// Keys that gates and steps share.
const OVERLAY_NAME: Key = Key::new("name", Kind::Name, "name, as `fillings` has it").required();
const OVERLAY_FROM: Key = Key::new(
    "from_um",
    Kind::Length(Range::Any),
    "left border of a strip across the whole mesa, from its lowest to its highest y",
);
const OVERLAY_TO: Key = Key::new("to_um", Kind::Length(Range::Any), "right border of a strip across the whole mesa");
const OVERLAY_OUTLINE: Key = Key::new("outline_um", Kind::Outline, "any shape in place of a strip: corners [x, y]");
const OVERLAY_MIXING: Key = Key::new("mixing", Kind::Mixing, "mixing along its own borders");

static GATE: TableSpec = TableSpec {
    name: "gate",
    keys: &[
        OVERLAY_NAME,
        OVERLAY_FROM,
        OVERLAY_TO,
        OVERLAY_OUTLINE,
        Key::new("density_per_m2_per_V", Kind::Number(Range::NotZero), "change of density per volt"),
        Key::new("zero_V", Kind::Number(Range::Any), "voltage at which the gated density is the layer's"),
        Key::new("limits_V", Kind::Limits, "lowest and highest voltage allowed"),
        OVERLAY_MIXING,
    ],
};

static STEP: TableSpec =
    TableSpec { name: "step", keys: &[OVERLAY_NAME, OVERLAY_FROM, OVERLAY_TO, OVERLAY_OUTLINE, OVERLAY_MIXING] };

static POINT: TableSpec = TableSpec {
    name: "point",
    keys: &[
        Key::new("name", Kind::Name, "name of the operating point").required(),
        Key::new("field_T", Kind::Number(Range::Magnitude), "magnitude of the field; both polarities are solved"),
        Key::new("bulk", Kind::Filling, "filling of the ungated mesa, below zero for holes"),
        Key::new("bulk_partial", Kind::Boolean, "allows a bulk filling between steps").default("false"),
        Key::new("fillings", Kind::Open(&Kind::Filling), "fillings under gates, steps and overlaps `\"A+B\"`"),
        Key::new("gates_V", Kind::Open(&Kind::Number(Range::Any)), "gate voltages"),
        Key::new("mixing", Kind::Mixing, "in place of `mixing` of [edge]"),
        Key::new("interface_mixing", Kind::Mixing, "in place of `interface_mixing` of [edge]"),
        Key::new("opposite_mixing", Kind::Mixing, "in place of `opposite_mixing` of [edge]"),
        Key::new("modes", Kind::One(&MODE_COUNTS), "counter-running edge modes in place of fillings"),
        Key::new("backscatter_um", Kind::Length(Range::Positive), "backscattering length of modes 1/1"),
    ],
};

static MODE_COUNTS: TableSpec = TableSpec {
    name: "point.modes",
    keys: &[
        Key::new("forward", Kind::Count(0), "modes that run clockwise at polarity +").required(),
        Key::new("backward", Kind::Count(0), "modes that run against them").required(),
    ],
};

static READING: TableSpec = TableSpec {
    name: "reading",
    keys: &[
        Key::new("name", Kind::Name, "name to print"),
        Key::new("current", Kind::NamePair, "contacts where the current enters and leaves").required(),
        Key::new("voltage", Kind::NamePair, "contacts of the meter's + and − input").required(),
    ],
};

static BENCH: TableSpec = TableSpec {
    name: "bench",
    keys: &[
        Key::new("devices", Kind::Texts, "device files, relative to this one").required(),
        Key::new("names", Kind::Names, "what the bench calls them; without it their ids"),
        Key::new("posts", Kind::Names, "binding posts, on which wires meet beside the devices"),
    ],
};

static LINK: TableSpec = TableSpec {
    name: "link",
    keys: &[
        Key::new("from", Kind::Name, "where the wire starts: device and contact such as A:1, or a post").required(),
        Key::new("to", Kind::Name, "where it ends").required(),
        Key::new("ohm", Kind::Number(Range::NotNegative), "resistance of the wire; at 0 both ends are one")
            .default("0"),
    ],
};
