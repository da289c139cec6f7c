//! The lasting names of this crate's notices, for scripts and tests.

macro_rules! codes {
    ($($(#[$doc:meta])* $name:ident = $text:literal;)*) => {
        $($(#[$doc])* pub const $name: &str = $text;)*

        /// Every code of this crate.
        pub const ALL: &[&str] = &[$($name),*];
    };
}

codes! {
    /// The text is no TOML: the parser's own words and place.
    SYNTAX = "toml-syntax";
    /// A key that nothing reads.
    UNKNOWN_KEY = "unknown-key";
    /// A key of the shop file stands in a sheet.
    SHOP_KEY_IN_SHEET = "shop-key-in-sheet";
    /// A value of another kind than its key takes.
    WRONG_TYPE = "wrong-type";
    /// A number outside its key's range, or no finite number.
    OUT_OF_RANGE = "out-of-range";
    /// A count that is no whole number.
    NOT_WHOLE = "not-a-whole-number";
    /// A text of nothing but spaces.
    BLANK_TEXT = "blank-text";
    /// A list that needs an entry has none.
    EMPTY_LIST = "empty-list";
    /// A key that must be given is given nowhere.
    MISSING_KEY = "missing-key";
    /// The sheet gives the keys of neither form of output.
    NO_OUTPUT = "no-output";
    /// The sheet gives keys of both forms of output.
    TWO_OUTPUTS = "two-outputs";
    /// A key that means nothing beside the sheet's other keys.
    WITHOUT_MEANING = "key-without-meaning";
    /// Two keys whose figures are in the wrong order.
    WRONG_ORDER = "wrong-order";
    /// A derating policy that nobody defines.
    UNKNOWN_POLICY = "unknown-policy";
    /// A shop's policy under the name of a built-in one.
    POLICY_NAME_TAKEN = "policy-name-taken";
    /// A word that is none of those its key knows, such as a life-cycle word.
    UNKNOWN_WORD = "unknown-word";
    /// Every weight of the ranking is 0.
    NO_WEIGHT = "weights-all-zero";
    /// Warning: less current flows into a short than the load may draw.
    FAULT_BELOW_LOAD = "fault-below-load";
    /// An argument of `--set` that is no `KEY=VALUE`.
    SET_MALFORMED = "set-malformed";
    /// Two arguments of `--set` for one key.
    SET_TWICE = "set-twice";
}
