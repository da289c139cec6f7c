//! Every key of a rail sheet, of a derating policy and of a shop file, declared once.
//!
//! The reader, its messages, the suggestions for misspelt keys, the list of what was assumed and
//! the reference in the docs all follow from these declarations. A new key is one entry of
//! [`ALL`] and the place where [`crate::requirement`] uses it.

use circuit::rail::Derating;
use circuit::slot::Slot;
use circuit::status::Status;
use quantity::notation::Unit;

use crate::bounds::{Bounds, figure};

/// What a key takes.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Kind {
    /// A finite number within these bounds, in the key's unit.
    Number(Bounds),
    /// A whole number, at least this.
    Count(u64),
    /// A number of seconds within these bounds, or the word [`FOREVER`].
    Duration(Bounds),
    /// A text.
    Text,
    /// `true` or `false`.
    Flag,
    /// A text or a list of texts, at least so many.
    Texts(usize),
    /// One of these words or a list of them, in any case.
    Words(&'static [&'static str]),
    /// The name of a derating policy, or an inline table of its fields.
    Policy,
}

/// The word for a short that has no end.
pub const FOREVER: &str = "forever";

/// The largest count: beyond it a double no longer holds every whole number.
pub const LARGEST_COUNT: u64 = 1 << 53;

/// What holds where a key is given neither by the sheet nor by the shop.
#[derive(Debug, Clone, Copy)]
pub enum Fallback {
    /// The key must be given.
    Required,
    /// Nothing is assumed; the words say what follows.
    Absent(&'static str),
    /// This number, in the key's unit.
    Number(f64),
    /// `true` or `false`.
    Flag(bool),
    /// This text.
    Text(&'static str),
    /// These texts.
    Texts(&'static [&'static str]),
    /// So many times the figure of another key.
    Multiple(f64, &'static Key),
    /// Something that differs from part to part, in words.
    PerPart(&'static str),
}

/// When a key has a meaning. Out of place it is an error in a sheet, and ignored from a shop.
#[derive(Debug, Clone, Copy)]
pub enum Applies {
    /// In every sheet.
    Always,
    /// With a fixed output.
    FixedOutput,
    /// With an adjustable output.
    AdjustableOutput,
    /// Where the other key is given.
    With(&'static Key),
    /// Where the other key is not given.
    Without(&'static Key),
}

/// The declaration of one key.
#[derive(Debug, Clone, Copy)]
pub struct Key {
    /// The dotted name: `feed.min_v`.
    pub name: &'static str,
    /// The unit of its number as written.
    pub unit: Unit,
    /// What it means, in one clause.
    pub meaning: &'static str,
    /// What it takes.
    pub kind: Kind,
    /// What holds without it.
    pub fallback: Fallback,
    /// When it has a meaning.
    pub applies: Applies,
}

impl Key {
    const fn new(name: &'static str, unit: Unit, kind: Kind, meaning: &'static str) -> Self {
        Key { name, unit, meaning, kind, fallback: Fallback::Required, applies: Applies::Always }
    }

    const fn or(self, fallback: Fallback) -> Self {
        Key { fallback, ..self }
    }

    const fn only(self, applies: Applies) -> Self {
        Key { applies, ..self }
    }

    /// The section that holds the key, empty for a key outside all sections.
    pub fn section(&self) -> &'static str {
        self.name.rsplit_once('.').map_or("", |(section, _)| section)
    }

    /// The key's name inside its section.
    pub fn short_name(&self) -> &'static str {
        self.name.rsplit_once('.').map_or(self.name, |(_, name)| name)
    }

    /// What one unit of the written number is worth inside the program: percent keys become
    /// fractions, all others stay as they are.
    pub fn scaled(&self, written: f64) -> f64 {
        match self.unit {
            Unit::Percent | Unit::PercentPerDegree => written / 100.0,
            _ => written,
        }
    }

    /// What the key takes, for a message: "a number above 0, in V".
    pub fn expects(&self) -> String {
        match self.kind {
            Kind::Number(bounds) => self.expects_number(bounds),
            Kind::Count(least) => {
                format!("a whole number, at least {least}, at most {LARGEST_COUNT}")
            }
            Kind::Duration(bounds) => {
                format!("{}, or \"{FOREVER}\"", self.expects_number(bounds))
            }
            Kind::Text => "a text in quotes".to_owned(),
            Kind::Flag => "true or false".to_owned(),
            Kind::Texts(0) => "a text in quotes, or a list of texts".to_owned(),
            Kind::Texts(least) => {
                format!("a text in quotes, or a list of texts, {least} at least")
            }
            Kind::Words(words) => format!("one or several of {}", words.join(", ")),
            Kind::Policy => "the name of a derating policy, or a table of its fields".to_owned(),
        }
    }

    fn expects_number(&self, bounds: Bounds) -> String {
        let mut text = "a number".to_owned();
        if bounds != Bounds::ANY {
            text.push(' ');
            text.push_str(&bounds.to_string());
        }
        if self.unit != Unit::Plain {
            text.push_str(", in ");
            text.push_str(self.unit.symbol());
        }
        text
    }

    /// The range as the reference shows it.
    pub fn range(&self) -> String {
        match self.kind {
            Kind::Number(bounds) => bounds.to_string(),
            Kind::Duration(bounds) => format!("{bounds}, or \"{FOREVER}\""),
            Kind::Count(least) => format!("whole, at least {least}"),
            Kind::Text => "text".to_owned(),
            Kind::Flag => "true, false".to_owned(),
            Kind::Texts(_) => "text or list".to_owned(),
            Kind::Words(words) => format!("of {}", words.join(", ")),
            Kind::Policy => "name or table".to_owned(),
        }
    }

    /// The default as the reference shows it.
    pub fn default_in_words(&self) -> String {
        match self.fallback {
            Fallback::Required => "required".to_owned(),
            Fallback::Absent(words) | Fallback::PerPart(words) => words.to_owned(),
            Fallback::Multiple(1.0, of) => of.name.to_owned(),
            Fallback::Multiple(factor, of) => format!("{} × {}", figure(factor), of.name),
            _ => self.default_as_toml().unwrap_or_default(),
        }
    }

    /// The default as one would write it in a sheet; None where it is no fixed value.
    pub fn default_as_toml(&self) -> Option<String> {
        match self.fallback {
            Fallback::Number(x) => Some(figure(x)),
            Fallback::Flag(flag) => Some(flag.to_string()),
            Fallback::Text(text) => Some(format!("\"{text}\"")),
            Fallback::Texts(texts) => Some(format!("{texts:?}")),
            Fallback::Required
            | Fallback::Absent(_)
            | Fallback::Multiple(..)
            | Fallback::PerPart(_) => None,
        }
    }
}

/// Two declarations are the same key where they have the same name.
impl PartialEq for Key {
    fn eq(&self, other: &Self) -> bool {
        self.name == other.name
    }
}

const ANY: Kind = Kind::Number(Bounds::ANY);
const POSITIVE: Kind = Kind::Number(Bounds::ANY.above(0.0));
const NOT_NEGATIVE: Kind = Kind::Number(Bounds::ANY.at_least(0.0));
const FRACTION: Kind = Kind::Number(Bounds::ANY.above(0.0).at_most(1.0));

/// Names each declaration, and lists them all in the order in which they stand.
macro_rules! keys {
    ($($name:ident = $key:expr;)*) => {
        $(#[allow(missing_docs)] // each declaration states its own meaning
        pub static $name: Key = $key;)*

        /// Every key of a rail sheet, in the order of the reference.
        pub static ALL: &[&Key] = &[$(&$name),*];
    };
}

keys! {
    RAIL_NAME = Key::new("rail.name", Unit::Plain, Kind::Text, "what the rail is called");
    RAIL_BOARDS = Key::new("rail.boards", Unit::Plain, Kind::Count(1),
        "boards to build: decides which price break counts")
        .or(Fallback::Number(1.0));

    FEED_MIN_V = Key::new("feed.min_v", Unit::Volt, POSITIVE,
        "VUmin: the valley of the ripple at low mains and full load");
    FEED_NOMINAL_V = Key::new("feed.nominal_v", Unit::Volt, POSITIVE,
        "VUnom: the feed at which efficiency is stated");
    FEED_MAX_V = Key::new("feed.max_v", Unit::Volt, POSITIVE, "VUmax: high mains, no load");
    FEED_MAX_LOADED_V = Key::new("feed.max_loaded_v", Unit::Volt, POSITIVE,
        "VUL: the highest mean feed at full load; from no load to full load the feed falls in a \
         straight line from VUmax to VUL")
        .or(Fallback::Multiple(1.0, &FEED_MAX_V));

    OUTPUT_VOLTAGE_V = Key::new("output.voltage_v", Unit::Volt, POSITIVE, "V: the output")
        .only(Applies::FixedOutput);
    OUTPUT_TOLERANCE_PCT = Key::new("output.tolerance_pct", Unit::Percent, POSITIVE,
        "τ: the error of the output that is accepted either way")
        .only(Applies::FixedOutput);
    OUTPUT_ADJUST_FROM_V = Key::new("output.adjust_from_v", Unit::Volt, POSITIVE,
        "the lowest output that must be reached")
        .only(Applies::AdjustableOutput);
    OUTPUT_ADJUST_TO_V = Key::new("output.adjust_to_v", Unit::Volt, POSITIVE,
        "the highest output that must be reached")
        .only(Applies::AdjustableOutput);
    OUTPUT_LOW_STOP_V = Key::new("output.low_stop_v", Unit::Volt, POSITIVE,
        "the lowest output that the knob may be turned to")
        .or(Fallback::Multiple(0.75, &OUTPUT_ADJUST_FROM_V))
        .only(Applies::AdjustableOutput);
    OUTPUT_CEILING_V = Key::new("output.ceiling_v", Unit::Volt, POSITIVE,
        "never exceeded, however far the knob is turned")
        .or(Fallback::Absent("not checked"))
        .only(Applies::AdjustableOutput);

    LOAD_MAX_A = Key::new("load.max_a", Unit::Ampere, POSITIVE,
        "IL: the load, drawn anywhere in the output range");
    LOAD_MIN_A = Key::new("load.min_a", Unit::Ampere, NOT_NEGATIVE, "the load that is always there")
        .or(Fallback::Number(0.0));

    AMBIENT_MIN_C = Key::new("ambient.min_c", Unit::Celsius, ANY, "Tmin: the coldest air around every part");
    AMBIENT_MAX_C = Key::new("ambient.max_c", Unit::Celsius, ANY, "Tmax: the hottest air around every part");

    FAULT_LIMIT_A = Key::new("fault.limit_a", Unit::Ampere, POSITIVE,
        "IF: the current that flows into a shorted output, limited by something outside")
        .or(Fallback::Absent("no fault checks are made"));
    FAULT_LASTS_S = Key::new("fault.lasts_s", Unit::Second, Kind::Duration(Bounds::ANY.above(0.0)),
        "tF: how long a short may last; more than 10 s counts as for ever")
        .or(Fallback::Text(FOREVER))
        .only(Applies::With(&FAULT_LIMIT_A));

    REFERENCE_BIAS_A = Key::new("reference.bias_a", Unit::Ampere, POSITIVE, "the zener current to aim for")
        .or(Fallback::PerPart("each zener's izt_a"));

    DIVIDER_MIN_A = Key::new("divider.min_a", Unit::Ampere, POSITIVE, "the least divider current")
        .or(Fallback::Number(0.0005));
    DIVIDER_MAX_A = Key::new("divider.max_a", Unit::Ampere, POSITIVE, "the greatest divider current")
        .or(Fallback::Number(0.002));
    DIVIDER_ALLOW_ERROR_V = Key::new("divider.allow_error_v", Unit::Volt, NOT_NEGATIVE,
        "the amplifier error that the divider is chosen for")
        .or(Fallback::Number(0.05));
    DIVIDER_ALLOW_BIAS_A = Key::new("divider.allow_bias_a", Unit::Ampere, NOT_NEGATIVE,
        "the amplifier input current that the divider is chosen for")
        .or(Fallback::Number(1e-6));

    THERMAL_INTERFACE_C_PER_W = Key::new("thermal.interface_c_per_w", Unit::CelsiusPerWatt, NOT_NEGATIVE,
        "θCS: from the transistor's case to its heatsink")
        .or(Fallback::Number(1.0));
    THERMAL_SINK_C_PER_W = Key::new("thermal.sink_c_per_w", Unit::CelsiusPerWatt, NOT_NEGATIVE,
        "θSA of a sink that is there already: no heatsink is chosen or paid for")
        .or(Fallback::Absent("a heatsink is chosen"));

    DERATING = Key::new("derating", Unit::Plain, Kind::Policy, "how much of each limit may be used")
        .or(Fallback::Text("none"));

    ASSUME_HFE_TEMPCO_PCT_PER_C = Key::new("assume.hfe_tempco_pct_per_c", Unit::PercentPerDegree, ANY,
        "fall of the current gain per degree below 25 °C, for a transistor whose row leaves it blank")
        .or(Fallback::Absent("0.5 for one junction, 0.8 for two"));
    ASSUME_GAIN_DB = Key::new("assume.gain_db", Unit::Decibel, ANY,
        "open-loop gain of an amplifier whose row leaves it blank")
        .or(Fallback::Number(80.0));
    ASSUME_PSRR_DB = Key::new("assume.psrr_db", Unit::Decibel, ANY,
        "supply rejection of an amplifier whose row leaves it blank")
        .or(Fallback::Number(60.0));
    ASSUME_CMRR_DB = Key::new("assume.cmrr_db", Unit::Decibel, ANY,
        "common-mode rejection of an amplifier whose row leaves it blank")
        .or(Fallback::Number(65.0));
    ASSUME_VS_TEST_V = Key::new("assume.vs_test_v", Unit::Volt, ANY,
        "supply at which the offset is stated, for an amplifier whose row leaves it blank")
        .or(Fallback::Number(5.0));
    ASSUME_ZENER_KNEE = Key::new("assume.zener_knee", Unit::Plain, Kind::Number(Bounds::ANY.at_least(1.0)),
        "exponent with which impedance rises below the test current, for a zener whose row gives \
         no knee")
        .or(Fallback::Number(1.5));

    PARTS_ALLOW_STATUS = Key::new("parts.allow_status", Unit::Plain, Kind::Words(&Status::WORDS),
        "life-cycle words of the parts that may be chosen")
        .or(Fallback::Texts(&["active", "unknown"]));
    PARTS_NEED_STOCK = Key::new("parts.need_stock", Unit::Plain, Kind::Flag,
        "true: a part needs as many pieces in stock as there are boards; resistor lines are exempt")
        .or(Fallback::Flag(false));
    PARTS_BAN = Key::new("parts.ban", Unit::Plain, Kind::Texts(0),
        "parts that are never used; the sheet's and the shop's add up")
        .or(Fallback::Texts(&[]));
    PARTS_USE_ZENER = pin("parts.use.zener", "the only zeners to choose from");
    PARTS_USE_BIAS_LINE = pin("parts.use.bias_line", "the only resistor lines to take RZ from");
    PARTS_USE_AMPLIFIER = pin("parts.use.amplifier", "the only amplifiers to choose from");
    PARTS_USE_DIVIDER_LINE = pin("parts.use.divider_line",
        "the only resistor lines to take RF, RI and RX from");
    PARTS_USE_POT = pin("parts.use.pot", "the only pots to choose from")
        .only(Applies::AdjustableOutput);
    PARTS_USE_PASS = pin("parts.use.pass", "the only pass transistors to choose from");
    PARTS_USE_HEATSINK = pin("parts.use.heatsink",
        "the only heatsinks to choose from; rules out a transistor without one")
        .only(Applies::Without(&THERMAL_SINK_C_PER_W));

    RANK_COST = Key::new("rank.cost", Unit::Plain, NOT_NEGATIVE, "weight of cost in the score")
        .or(Fallback::Number(1.0));
    RANK_LOSS = Key::new("rank.loss", Unit::Plain, NOT_NEGATIVE, "weight of loss in the score")
        .or(Fallback::Number(1.0));
    RANK_STRESS = Key::new("rank.stress", Unit::Plain, NOT_NEGATIVE, "weight of stress in the score")
        .or(Fallback::Number(1.0));
}

const fn pin(name: &'static str, meaning: &'static str) -> Key {
    Key::new(name, Unit::Plain, Kind::Texts(1), meaning)
        .or(Fallback::Absent("every part of the catalog"))
}

/// The key that pins a slot to named parts.
pub fn pin_of(slot: Slot) -> &'static Key {
    match slot {
        Slot::Zener => &PARTS_USE_ZENER,
        Slot::BiasLine => &PARTS_USE_BIAS_LINE,
        Slot::Amplifier => &PARTS_USE_AMPLIFIER,
        Slot::DividerLine => &PARTS_USE_DIVIDER_LINE,
        Slot::Pot => &PARTS_USE_POT,
        Slot::Pass => &PARTS_USE_PASS,
        Slot::Heatsink => &PARTS_USE_HEATSINK,
    }
}

/// A field of a derating policy: its declaration, and where its figure goes.
#[derive(Debug)]
pub struct PolicyField {
    /// The declaration; `key.name` is the field's name inside the policy.
    pub key: Key,
    /// Puts the figure into a policy.
    pub set: fn(&mut Derating, f64),
}

const fn fraction(
    name: &'static str,
    meaning: &'static str,
    set: fn(&mut Derating, f64),
) -> PolicyField {
    PolicyField {
        key: Key::new(name, Unit::Plain, FRACTION, meaning).or(Fallback::Number(1.0)),
        set,
    }
}

const fn degrees(
    name: &'static str,
    meaning: &'static str,
    set: fn(&mut Derating, f64),
) -> PolicyField {
    // Below 0 a policy would allow more than the data sheet does.
    PolicyField {
        key: Key::new(name, Unit::Celsius, NOT_NEGATIVE, meaning).or(Fallback::Number(0.0)),
        set,
    }
}

/// Every field of a derating policy.
pub static POLICY_FIELDS: &[PolicyField] = &[
    fraction("collector_voltage", "of the transistor's VCEO", |d, x| d.collector_voltage = x),
    fraction("collector_current", "of its greatest collector current", |d, x| {
        d.collector_current = x;
    }),
    fraction("pass_power", "of its power rating", |d, x| d.pass_power = x),
    fraction("soa", "of its safe operating area in service", |d, x| d.soa = x),
    fraction("soa_fault", "of its safe operating area during a fault", |d, x| d.soa_fault = x),
    fraction("amp_supply", "of the amplifier's greatest supply", |d, x| d.amp_supply = x),
    fraction("amp_current", "of the amplifier's output currents", |d, x| d.amp_current = x),
    fraction("zener_power", "of the zener's power rating", |d, x| d.zener_power = x),
    fraction("resistor_power", "of resistor and pot power ratings", |d, x| d.resistor_power = x),
    fraction("resistor_voltage", "of resistor and pot voltage ratings", |d, x| {
        d.resistor_voltage = x;
    }),
    degrees("junction_below_max_c", "kept below every junction limit in service", |d, x| {
        d.junction_below_max_c = x;
    }),
    degrees("fault_junction_below_max_c", "kept below junction limits during a fault", |d, x| {
        d.fault_junction_below_max_c = x;
    }),
    PolicyField {
        key: Key::new("junction_cap_c", Unit::Celsius, ANY, "no junction above this in service")
            .or(Fallback::Absent("no cap")),
        set: |d, x| d.junction_cap_c = Some(x),
    },
];

/// The shop's currency, the one plain key that a sheet does not know.
pub static CURRENCY: Key =
    Key::new("currency", Unit::Plain, Kind::Text, "the currency of every price")
        .or(Fallback::Absent("none is shown"));

/// The shop's section of derating policies, `[policy.NAME]`.
pub const POLICY_SECTION: &str = "policy";

/// The shop's section of column names: `"name in the file" = "name the program knows"`.
pub const COLUMNS_SECTION: &str = "columns";

/// The keys and sections that only a shop file has.
pub const SHOP_ONLY: [&str; 3] = ["currency", POLICY_SECTION, COLUMNS_SECTION];

/// A rule between the figures of two keys.
#[derive(Debug, Clone, Copy)]
pub struct OrderRule {
    /// The key of the lower figure.
    pub low: &'static Key,
    /// The key of the higher figure.
    pub high: &'static Key,
    /// The two may not be equal.
    pub strict: bool,
}

const fn not_above(low: &'static Key, high: &'static Key) -> OrderRule {
    OrderRule { low, high, strict: false }
}

const fn below(low: &'static Key, high: &'static Key) -> OrderRule {
    OrderRule { low, high, strict: true }
}

/// Every rule between two keys.
pub static ORDER_RULES: &[OrderRule] = &[
    not_above(&FEED_MIN_V, &FEED_NOMINAL_V),
    not_above(&FEED_NOMINAL_V, &FEED_MAX_V),
    not_above(&FEED_NOMINAL_V, &FEED_MAX_LOADED_V),
    not_above(&FEED_MAX_LOADED_V, &FEED_MAX_V),
    below(&OUTPUT_ADJUST_FROM_V, &OUTPUT_ADJUST_TO_V),
    not_above(&OUTPUT_LOW_STOP_V, &OUTPUT_ADJUST_FROM_V),
    not_above(&OUTPUT_ADJUST_TO_V, &OUTPUT_CEILING_V),
    not_above(&AMBIENT_MIN_C, &AMBIENT_MAX_C),
    below(&DIVIDER_MIN_A, &DIVIDER_MAX_A),
];

/// The declaration of a sheet key.
pub fn named(name: &str) -> Option<&'static Key> {
    ALL.iter().copied().find(|key| key.name == name)
}

/// The sections that sheet keys stand in, in declared order; the keys outside all sections are no
/// section.
pub fn sections() -> impl Iterator<Item = &'static str> {
    let names = ALL.iter().map(|key| key.section()).filter(|name| !name.is_empty());
    let mut seen: Vec<&str> = Vec::new();
    names.filter(move |name| {
        let new = !seen.contains(name);
        if new {
            seen.push(name);
        }
        new
    })
}
