//! Keys of the cooldown file.

use crate::syntax::keys::FileSpec;
use crate::syntax::keys::Key;
use crate::syntax::keys::Kind;
use crate::syntax::keys::Range;
use crate::syntax::keys::TableSpec;

/// The cooldown file.
pub static COOLDOWN_FILE: FileSpec = FileSpec { what: "cooldown file", root: &ROOT };

const WIRING: &str = "the pins of the device file are used as they stand; change `pin` there after a re-patch";

static ROOT: TableSpec = TableSpec {
    name: "",
    keys: &[
        Key::new("format", Kind::Count(1), "version of this file format, 1").required(),
        Key::new("device", Kind::Name, "id of the device that was cooled").required(),
        Key::new("readings", Kind::Line, "table of measured readings, beside this file"),
        Key::new("cooldown", Kind::One(&COOLDOWN), "when and how it was cooled"),
        Key::new("note", Kind::Many(&NOTE), "a dated note"),
        Key::new("picture", Kind::Many(&PICTURE), "a picture for the sheet").stated(),
        Key::new("names", Kind::Open(&Kind::Name), "a receiver's own names of contacts").stated(),
        Key::new("wiring", Kind::Open(&Kind::Name), "plug of each contact after a re-patch").not_yet(WIRING),
        Key::new("source", Kind::One(&SOURCE), "what drives the current"),
        Key::new("line", Kind::Many(&LINE), "wire and filter from a contact to the rack"),
        Key::new("meter", Kind::Many(&METER), "a voltmeter; the first is meant where none is named"),
        Key::new("contacts", Kind::Open(&STATE), "states of contacts; what is not named is live"),
        Key::new("join", Kind::Many(&JOIN), "contacts that share one potential on the chip"),
        Key::new("magnet", Kind::One(&MAGNET), "where the field points, and what the magnet stores"),
        Key::new("room", Kind::One(&ROOM), "the room, for cautions on oxygen"),
        Key::new("sweep", Kind::Many(&SWEEP), "a measured sweep").stated(),
    ],
};

static COOLDOWN: TableSpec = TableSpec {
    name: "cooldown",
    keys: &[
        Key::new("id", Kind::Name, "identity of the cooldown").default("\"cooldown\""),
        Key::new("date", Kind::Date, "date of the cooldown"),
        Key::new("revision", Kind::Count(1), "revision of the sheet").default("1"),
        Key::new("temperature_K", Kind::Number(Range::Positive), "temperature of the bath or stage"),
        Key::new("electron_temperature_K", Kind::Number(Range::Positive), "temperature of the electrons"),
        Key::new("illumination", Kind::Text, "illumination before the measurement"),
        Key::new("operator", Kind::Text, "who measured"),
        Key::new("cryostat", Kind::Text, "in which cryostat"),
        Key::new("place", Kind::Text, "in which laboratory"),
        Key::new("coverage_factor", Kind::Number(Range::Positive), "divides every written uncertainty").default("1"),
    ],
};

static NOTE: TableSpec = TableSpec {
    name: "note",
    keys: &[
        Key::new("date", Kind::Date, "date of the note"),
        Key::new("text", Kind::Text, "text of the note").required(),
    ],
};

static PICTURE: TableSpec = TableSpec {
    name: "picture",
    keys: &[
        Key::new("file", Kind::Line, "picture file beside this file").required(),
        Key::new("caption", Kind::Text, "line below the picture"),
    ],
};

static SOURCE: TableSpec = TableSpec {
    name: "source",
    keys: &[
        Key::new("current_nA", Kind::Number(Range::Positive), "ideal current"),
        Key::new("u_current_nA", Kind::Number(Range::NotNegative), "its standard uncertainty"),
        Key::new("voltage_V", Kind::Number(Range::Positive), "source voltage, in place of a current"),
        Key::new("series_ohm", Kind::Number(Range::NotNegative), "resistor between the source and the device"),
        Key::new("ammeter_ohm", Kind::Number(Range::NotNegative), "ammeter between the outlet and ground"),
        Key::new("current", Kind::Word(&["nominal", "inlet", "outlet"]), "current that divides the voltages")
            .default("\"nominal\""),
        Key::new("frequency_Hz", Kind::Number(Range::Positive), "frequency of the excitation"),
        Key::new("current_from", Kind::Text, "where the current was got from the data"),
    ],
};

static LINE: TableSpec = TableSpec {
    name: "line",
    keys: &[
        Key::new("contact", Kind::Name, "the contact").required(),
        Key::new("ohm", Kind::Number(Range::NotNegative), "resistance of wire and filter").default("0"),
        Key::new("u_ohm", Kind::Number(Range::NotNegative), "its standard uncertainty"),
        Key::new("capacitance_nF", Kind::Number(Range::NotNegative), "from the rack node to ground"),
        Key::new("plug", Kind::Name, "plug at the rack"),
        Key::new("box", Kind::Text, "breakout box"),
    ],
};

static METER: TableSpec = TableSpec {
    name: "meter",
    keys: &[
        Key::new("name", Kind::Name, "name of the meter").required(),
        Key::new("input_ohm", Kind::Number(Range::Positive), "input resistance; without it no current flows in"),
        Key::new("input", Kind::Word(&["ground", "across"]), "from each input to ground, or between the inputs")
            .default("\"ground\""),
        Key::new("gain", Kind::Number(Range::NotZero), "shown value over true value").default("1"),
        Key::new("u_gain", Kind::Number(Range::NotNegative), "standard uncertainty of the gain"),
        Key::new("phase_deg", Kind::Number(Range::Any), "phase by which the meter turns its signal").default("0"),
    ],
};

static STATE: Kind = Kind::Word(&["live", "open", "grounded"]);

static JOIN: TableSpec =
    TableSpec { name: "join", keys: &[Key::new("contacts", Kind::NameList, "contacts that are joined").required()] };

static MAGNET: TableSpec = TableSpec {
    name: "magnet",
    keys: &[
        Key::new("positive", Kind::Word(&["toward", "away", "unknown"]), "where a positive console field points")
            .default("\"unknown\""),
        Key::new("max_field_T", Kind::Number(Range::Positive), "highest field of the magnet"),
        Key::new("current_A", Kind::Number(Range::Positive), "current at the highest field"),
        Key::new("inductance_H", Kind::Number(Range::Positive), "inductance of the magnet"),
        Key::new("remanence_mT", Kind::Number(Range::NotNegative), "field left at zero current"),
    ],
};

static ROOM: TableSpec = TableSpec {
    name: "room",
    keys: &[
        Key::new("volume_m3", Kind::Number(Range::Positive), "volume of the room"),
        Key::new("helium_litre", Kind::Number(Range::NotNegative), "liquid helium in it"),
        Key::new("nitrogen_litre", Kind::Number(Range::NotNegative), "liquid nitrogen in it"),
        Key::new("oxygen_alarm", Kind::Boolean, "whether an oxygen alarm is fitted"),
    ],
};

static SWEEP: TableSpec = TableSpec {
    name: "sweep",
    keys: &[
        Key::new("name", Kind::Name, "name of the sweep").required(),
        Key::new("file", Kind::Line, "table of the sweep, beside this file").required(),
        Key::new("point", Kind::Name, "operating point of the device file"),
        Key::new("polarity", Kind::Word(&["+", "-", "−", "toward", "away"]), "polarity of the field"),
        Key::new("direction", Kind::Word(&["up", "down", "both"]), "direction of the sweep"),
        Key::new("temperature_K", Kind::Number(Range::Positive), "temperature during the sweep"),
        Key::new("current_nA", Kind::Number(Range::Positive), "current during the sweep"),
        Key::new("decimal", Kind::Word(&["point", "comma"]), "decimal sign of the table"),
        Key::new("separator", Kind::Text, "what stands between columns"),
        Key::new("comment", Kind::Text, "what starts a line to be left out"),
        Key::new("encoding", Kind::Text, "encoding of the table"),
        Key::new("skip_rows", Kind::Count(0), "rows before the header"),
        Key::new("field", Kind::One(&FIELD_COLUMN), "column of the field"),
        Key::new("gate", Kind::One(&GATE_COLUMN), "column of the gate voltage, for gate sweeps"),
        Key::new("trace", Kind::Many(&TRACE), "a measured column").required(),
    ],
};

static FIELD_COLUMN: TableSpec = TableSpec {
    name: "sweep.field",
    keys: &[
        Key::new("column", Kind::Line, "header of the column").required(),
        Key::new("unit", Kind::Word(&["T", "mT", "G", "kG", "V", "A"]), "unit of the column").required(),
        Key::new("tesla_per_unit", Kind::Number(Range::NotZero), "field per volt or ampere of a monitor"),
    ],
};

static GATE_COLUMN: TableSpec = TableSpec {
    name: "sweep.gate",
    keys: &[
        Key::new("column", Kind::Line, "header of the column").required(),
        Key::new("unit", Kind::Word(&["V", "mV"]), "unit of the column").required(),
        Key::new("name", Kind::Name, "the gate that is swept"),
    ],
};

const TRACE_UNITS: &[&str] = &["V", "mV", "uV", "µV", "nV", "ohm", "kohm", "Ω", "kΩ", "h/e2"];

static TRACE: TableSpec = TableSpec {
    name: "sweep.trace",
    keys: &[
        Key::new("current", Kind::NamePair, "contacts where the current enters and leaves").required(),
        Key::new("voltage", Kind::NamePair, "contacts of the meter's + and − input").required(),
        Key::new("column", Kind::Line, "header of the column").required(),
        Key::new("unit", Kind::Word(TRACE_UNITS), "unit of the column; volts are divided by the current").required(),
        Key::new("gain", Kind::Number(Range::NotZero), "shown value over true value").default("1"),
        Key::new("quadrature", Kind::Line, "header of the column of the quadrature"),
        Key::new("squares", Kind::Number(Range::Positive), "squares between the probes, in place of the drawing's"),
        Key::new("u_squares", Kind::Number(Range::NotNegative), "standard uncertainty of the squares"),
    ],
};
