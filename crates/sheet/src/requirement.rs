//! The sheet as a whole: its form, what is assumed, the rules between keys, and the requirement
//! that comes of it.

use circuit::rail::{
    Ambient, Derating, DividerRules, Fault, Feed, Load, Output, Rail, StandIns, Thermal,
};
use circuit::slot::Slot;
use notice::{Excerpt, Notice, Place, has_errors};
use quantity::digits::{at_most, below, rounded};

use crate::argument;
use crate::bounds::figure;
use crate::code;
use crate::keys::{self, Applies, Fallback, Key, OrderRule};
use crate::policy;
use crate::settings::{self, Dialect, Given, Settings};
use crate::shop::ShopFile;
use crate::source::{Mark, Source};
use crate::value::{Entry, Value};

/// A rail sheet, checked and complete.
#[derive(Debug, Clone)]
pub struct Sheet {
    /// What the rail is called.
    pub name: String,
    /// Boards to build, at least 1.
    pub boards: u64,
    /// What is asked of the rail.
    pub rail: Rail,
    /// Which parts may be chosen.
    pub parts: PartRules,
    /// What counts how much in the ranking.
    pub weights: Weights,
    /// The currency of every price; None: none is shown.
    pub currency: Option<String>,
    /// Every default and stand-in that holds because neither sheet nor shop gives the key, in the
    /// order of the reference.
    pub assumed: Vec<Assumed>,
    /// What `--set` changed, as it was written.
    pub set: Vec<String>,
}

/// The weights of the ranking: each at least 0, not all 0.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Weights {
    /// wc.
    pub cost: f64,
    /// wl.
    pub loss: f64,
    /// ws.
    pub stress: f64,
}

/// Which parts may be chosen.
#[derive(Debug, Clone)]
pub struct PartRules {
    /// Life-cycle words in lower case, of [`circuit::status::Status::WORDS`].
    pub allow_status: Vec<String>,
    /// A part needs as many pieces in stock as there are boards.
    pub need_stock: bool,
    /// The only parts of a slot, by `Slot as usize`; None: every part of the catalog. Always None
    /// for a slot that the sheet leaves empty.
    pub pins: [Option<Vec<NamedPart>>; Slot::COUNT],
    /// Parts that are never used: the sheet's, then the shop's.
    pub bans: Vec<NamedPart>,
}

/// A part as a sheet or shop names it: a part of every maker, else `maker/part`.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct NamedPart {
    /// The name without spaces round it.
    pub text: String,
    /// Where it stands.
    pub place: Place,
    /// The line it stands in.
    pub excerpt: Option<Excerpt>,
    /// The shop names it, not the sheet.
    pub from_shop: bool,
}

/// A default or stand-in that was used.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Assumed {
    /// The key that is not given: `divider.min_a`.
    pub key: String,
    /// What holds in its place, as one would write it in a sheet, or in words.
    pub value: String,
}

/// Reads a sheet, with what the shop gives and what `--set` changes.
///
/// `file_name` is what notices call the sheet; each of `set` is a `KEY=VALUE`, and notices call it
/// `--set KEY=VALUE`. A figure is taken from `set`, else the sheet, else the shop, else the key's
/// default.
///
/// # Errors
///
/// None where the sheet has an error. All faults are in `notices`, which may also hold warnings
/// where the sheet is sound.
pub fn read(
    file_name: &str,
    text: &str,
    shop: &ShopFile,
    set: &[String],
    notices: &mut Vec<Notice>,
) -> Option<Sheet> {
    let mut found = Vec::new();
    let source = Source::file(file_name, text);
    let document = settings::parse(&source, &mut found);
    let mut own = Settings::default();
    if let Some(document) = &document {
        own.collect("", document, (&source, Dialect::Sheet), &mut found);
    }
    argument::apply(set, &mut own, &mut found);
    // Half a document would be blamed for what its other half says.
    let sheet = document.and_then(|_| {
        let form = form_of(&own, &source, &mut found);
        let request = Request { own: &own, shop, form };
        let assumed = request.check(&source, &mut found);
        if has_errors(&found) { None } else { request.sheet(assumed, set) }
    });
    found.sort_by(|a, b| a.place.cmp(&b.place));
    notices.append(&mut found);
    sheet
}

/// What kind of output is asked for.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Form {
    Fixed,
    Adjustable,
}

/// The form that the sheet's own output keys ask for; None with a notice where they ask for none
/// or both.
fn form_of(own: &Settings, source: &Source<'_>, notices: &mut Vec<Notice>) -> Option<Form> {
    const BOTH_FORMS: &str = "`output.voltage_v` and `output.tolerance_pct` for a fixed output, or \
                              `output.adjust_from_v` and `output.adjust_to_v` for an adjustable one";
    let first = |keys: &[&'static Key]| {
        keys.iter().find_map(|key| own.place_of(key).map(|mark| (key.name, mark)))
    };
    let fixed = first(&[&keys::OUTPUT_VOLTAGE_V, &keys::OUTPUT_TOLERANCE_PCT]);
    let range = first(&[&keys::OUTPUT_ADJUST_FROM_V, &keys::OUTPUT_ADJUST_TO_V]);
    let limits = first(&[&keys::OUTPUT_LOW_STOP_V, &keys::OUTPUT_CEILING_V]);
    match (fixed, range) {
        (Some((of_fixed, _)), Some((of_range, mark))) => {
            let message =
                format!("`{of_range}` asks for an adjustable output, `{of_fixed}` for a fixed one");
            let notice = mark.error(code::TWO_OUTPUTS, message).expected(BOTH_FORMS);
            notices.push(notice.mend("remove the keys of one form"));
            None
        }
        (Some(_), None) => Some(Form::Fixed),
        (None, Some(_)) => Some(Form::Adjustable),
        (None, None) if limits.is_some() => Some(Form::Adjustable),
        // The section was meant but is misspelt: that has its notice.
        (None, None) if own.attempted(&keys::OUTPUT_VOLTAGE_V) => None,
        (None, None) => {
            let section = own.section(keys::OUTPUT_VOLTAGE_V.section());
            let mark = section.cloned().unwrap_or_else(|| source.whole());
            let message = "the sheet asks for no output";
            notices.push(mark.error(code::NO_OUTPUT, message).expected(BOTH_FORMS));
            None
        }
    }
}

/// The sheet and the shop behind it.
struct Request<'a> {
    own: &'a Settings,
    shop: &'a ShopFile,
    /// None where the sheet's form is in doubt; then no key of either form is missed or refused.
    form: Option<Form>,
}

impl Request<'_> {
    /// The key has a meaning in this sheet.
    fn applies(&self, key: &Key) -> bool {
        match key.applies {
            Applies::Always => true,
            Applies::FixedOutput => self.form == Some(Form::Fixed),
            Applies::AdjustableOutput => self.form == Some(Form::Adjustable),
            Applies::With(other) => self.given(other).is_some(),
            Applies::Without(other) => self.given(other).is_none(),
        }
    }

    /// The key's value where it has a meaning: the sheet's, else the shop's.
    fn given(&self, key: &Key) -> Option<&Given> {
        if !self.applies(key) {
            return None;
        }
        self.own.get(key).or_else(|| self.shop.defaults.get(key))
    }

    /// The key was meant, though it could not be read: it has its notice already.
    fn attempted(&self, key: &Key) -> bool {
        self.own.attempted(key) || self.shop.defaults.attempted(key)
    }

    /// Checks all that goes beyond a single value, and lists what is assumed.
    fn check(&self, source: &Source<'_>, notices: &mut Vec<Notice>) -> Vec<Assumed> {
        let mut assumed = Vec::new();
        notices.extend(self.own.iter().filter_map(|given| self.without_meaning(given)));
        for key in keys::ALL {
            if !self.applies(key) || self.given(key).is_some() || self.attempted(key) {
                continue;
            }
            if matches!(key.fallback, Fallback::Required) {
                let section = self.own.section(key.section());
                let mark = section.cloned().unwrap_or_else(|| source.whole());
                let message = format!("`{}` is missing", key.name);
                notices.push(mark.error(code::MISSING_KEY, message).expected(key.expects()));
            } else if let Some(value) = self.default_in_use(key) {
                assumed.push(Assumed { key: key.name.to_owned(), value });
            }
        }
        notices.extend(keys::ORDER_RULES.iter().filter_map(|rule| self.wrong_order(rule)));
        notices.extend(self.fault_below_load());
        notices.extend(self.no_weight());
        notices.extend(self.unknown_policy());
        assumed
    }

    fn without_meaning(&self, given: &Given) -> Option<Notice> {
        let key = given.key;
        let why = match key.applies {
            Applies::Always => return None,
            Applies::FixedOutput | Applies::AdjustableOutput if self.form.is_none() => return None,
            _ if self.applies(key) => return None,
            Applies::FixedOutput => "with an adjustable output".to_owned(),
            Applies::AdjustableOutput => "with a fixed output".to_owned(),
            Applies::With(other) if self.attempted(other) => return None,
            Applies::With(other) => format!("without `{}`", other.name),
            Applies::Without(other) => format!("beside `{}`", other.name),
        };
        let message = format!("`{}` has no meaning {why}", key.name);
        Some(given.key_mark.error(code::WITHOUT_MEANING, message).mend("remove it"))
    }

    /// The default of a key that is not given, as "Assumed" shows it.
    fn default_in_use(&self, key: &Key) -> Option<String> {
        match key.fallback {
            Fallback::Required | Fallback::Absent(_) => None,
            Fallback::PerPart(words) => Some(words.to_owned()),
            Fallback::Multiple(..) => self.number(key).map(|x| figure(rounded(x))),
            Fallback::Number(_) | Fallback::Flag(_) | Fallback::Text(_) | Fallback::Texts(_) => {
                key.default_as_toml()
            }
        }
    }

    fn wrong_order(&self, rule: &OrderRule) -> Option<Notice> {
        let OrderRule { low, high, strict } = *rule;
        if self.attempted(low) || self.attempted(high) {
            return None;
        }
        let (low_figure, high_figure) = (self.number(low)?, self.number(high)?);
        let holds =
            if strict { below(low_figure, high_figure) } else { at_most(low_figure, high_figure) };
        if holds {
            return None;
        }
        // The sheet's own figure is to blame before the shop's, and the latter of two.
        let blamed = [self.own.get(high), self.own.get(low), self.given(high), self.given(low)];
        let blamed = blamed.into_iter().flatten().next()?;
        let relation = if strict { "below" } else { "at most" };
        Some(
            blamed
                .value_mark
                .error(
                    code::WRONG_ORDER,
                    format!("`{}` has to be {relation} `{}`", low.name, high.name),
                )
                .found(format!("{} and {}", self.told(low), self.told(high))),
        )
    }

    /// A figure with where it comes from.
    fn told(&self, key: &Key) -> String {
        let figure = self.number(key).map(|x| figure(rounded(x))).unwrap_or_default();
        let unit = key.unit.symbol();
        if self.own.get(key).is_some() {
            format!("{figure} {unit}")
        } else if self.given(key).is_some() {
            format!("{figure} {unit} (of the shop)")
        } else {
            format!("{figure} {unit} (by default)")
        }
    }

    fn fault_below_load(&self) -> Option<Notice> {
        let limit = self.given(&keys::FAULT_LIMIT_A)?;
        let (limit_a, load_a) =
            (self.number(&keys::FAULT_LIMIT_A)?, self.number(&keys::LOAD_MAX_A)?);
        below(limit_a, load_a).then(|| {
            let message = "less current flows into a short than the load may draw";
            limit
                .value_mark
                .warning(code::FAULT_BELOW_LOAD, message)
                .found(format!("{} A beside {} A of load", figure(limit_a), figure(load_a)))
                .mend("only a limiter that folds back does so")
        })
    }

    fn no_weight(&self) -> Option<Notice> {
        let weights = [&keys::RANK_COST, &keys::RANK_LOSS, &keys::RANK_STRESS];
        let all_zero = weights.iter().all(|key| self.number(key) == Some(0.0));
        if !all_zero || weights.iter().any(|key| self.attempted(key)) {
            return None;
        }
        let own = weights.iter().rev().find_map(|key| self.own.get(key));
        let blamed = own.or_else(|| weights.iter().rev().find_map(|key| self.given(key)))?;
        let message = "every weight of the ranking is 0: nothing would count";
        Some(blamed.value_mark.error(code::NO_WEIGHT, message).expected("one of them above 0"))
    }

    fn unknown_policy(&self) -> Option<Notice> {
        let given = self.own.get(&keys::DERATING)?;
        let Value::PolicyName(name) = &given.value else { return None };
        policy::named(name, &self.shop.policies)
            .is_none()
            .then(|| policy::unknown(&given.value_mark, name, &self.shop.policies))
    }

    /// The figure of a key, percent as a fraction, infinite for a duration without end: as given,
    /// else its default. None where there is neither.
    fn number(&self, key: &Key) -> Option<f64> {
        if let Some(given) = self.given(key) {
            return match given.value {
                Value::Number(written) => Some(key.scaled(written)),
                Value::Count(count) => Some(count as f64),
                _ => None,
            };
        }
        match key.fallback {
            Fallback::Number(written) => Some(key.scaled(written)),
            Fallback::Multiple(factor, of) => self.number(of).map(|x| factor * x),
            Fallback::Text(keys::FOREVER) => Some(f64::INFINITY),
            _ => None,
        }
    }

    fn entries(&self, key: &Key) -> &[Entry] {
        match self.given(key).map(|given| &given.value) {
            Some(Value::Texts(entries)) => entries,
            _ => &[],
        }
    }

    /// The requirement; None only where a check of this module let a fault through.
    fn sheet(&self, assumed: Vec<Assumed>, set: &[String]) -> Option<Sheet> {
        let Value::Text(name) = &self.given(&keys::RAIL_NAME)?.value else { return None };
        let boards = match self.given(&keys::RAIL_BOARDS).map(|given| &given.value) {
            Some(Value::Count(boards)) => *boards,
            _ => 1,
        };
        Some(Sheet {
            name: name.clone(),
            boards,
            rail: self.rail()?,
            parts: self.parts(),
            weights: Weights {
                cost: self.number(&keys::RANK_COST)?,
                loss: self.number(&keys::RANK_LOSS)?,
                stress: self.number(&keys::RANK_STRESS)?,
            },
            currency: self.shop.currency.clone(),
            assumed,
            set: set.to_vec(),
        })
    }

    fn rail(&self) -> Option<Rail> {
        Some(Rail {
            feed: Feed {
                min_v: self.number(&keys::FEED_MIN_V)?,
                nominal_v: self.number(&keys::FEED_NOMINAL_V)?,
                max_v: self.number(&keys::FEED_MAX_V)?,
                max_loaded_v: self.number(&keys::FEED_MAX_LOADED_V)?,
            },
            output: self.output()?,
            load: Load {
                max_a: self.number(&keys::LOAD_MAX_A)?,
                min_a: self.number(&keys::LOAD_MIN_A)?,
            },
            ambient: Ambient {
                min_c: self.number(&keys::AMBIENT_MIN_C)?,
                max_c: self.number(&keys::AMBIENT_MAX_C)?,
            },
            fault: match self.number(&keys::FAULT_LIMIT_A) {
                Some(limit_a) => {
                    Some(Fault { limit_a, lasts_s: self.number(&keys::FAULT_LASTS_S)? })
                }
                None => None,
            },
            bias_a: self.number(&keys::REFERENCE_BIAS_A),
            divider: DividerRules {
                min_a: self.number(&keys::DIVIDER_MIN_A)?,
                max_a: self.number(&keys::DIVIDER_MAX_A)?,
                allow_error_v: self.number(&keys::DIVIDER_ALLOW_ERROR_V)?,
                allow_bias_a: self.number(&keys::DIVIDER_ALLOW_BIAS_A)?,
            },
            thermal: Thermal {
                interface_c_per_w: self.number(&keys::THERMAL_INTERFACE_C_PER_W)?,
                sink_c_per_w: self.number(&keys::THERMAL_SINK_C_PER_W),
            },
            derating: self.derating()?,
            stand_ins: StandIns {
                hfe_tempco_per_c: self.number(&keys::ASSUME_HFE_TEMPCO_PCT_PER_C),
                gain_db: self.number(&keys::ASSUME_GAIN_DB)?,
                psrr_db: self.number(&keys::ASSUME_PSRR_DB)?,
                cmrr_db: self.number(&keys::ASSUME_CMRR_DB)?,
                vs_test_v: self.number(&keys::ASSUME_VS_TEST_V)?,
                zener_knee: self.number(&keys::ASSUME_ZENER_KNEE)?,
            },
        })
    }

    fn output(&self) -> Option<Output> {
        match self.form? {
            Form::Fixed => Some(Output::Fixed {
                voltage_v: self.number(&keys::OUTPUT_VOLTAGE_V)?,
                tolerance: self.number(&keys::OUTPUT_TOLERANCE_PCT)?,
            }),
            Form::Adjustable => Some(Output::Adjustable {
                from_v: self.number(&keys::OUTPUT_ADJUST_FROM_V)?,
                to_v: self.number(&keys::OUTPUT_ADJUST_TO_V)?,
                low_stop_v: self.number(&keys::OUTPUT_LOW_STOP_V)?,
                ceiling_v: self.number(&keys::OUTPUT_CEILING_V),
            }),
        }
    }

    fn derating(&self) -> Option<Derating> {
        match self.given(&keys::DERATING).map(|given| &given.value) {
            Some(Value::PolicyFields(derating)) => Some(*derating),
            Some(Value::PolicyName(name)) => policy::named(name, &self.shop.policies),
            _ => match keys::DERATING.fallback {
                Fallback::Text(name) => policy::named(name, &[]),
                _ => None,
            },
        }
    }

    fn parts(&self) -> PartRules {
        let allow_status = match keys::PARTS_ALLOW_STATUS.fallback {
            Fallback::Texts(words) if self.given(&keys::PARTS_ALLOW_STATUS).is_none() => {
                words.iter().map(|&word| word.to_owned()).collect()
            }
            _ => {
                let entries = self.entries(&keys::PARTS_ALLOW_STATUS).iter();
                entries.map(|entry| entry.text.clone()).collect()
            }
        };
        let need_stock = matches!(
            self.given(&keys::PARTS_NEED_STOCK).map(|given| &given.value),
            Some(Value::Flag(true))
        );
        let mut pins: [Option<Vec<NamedPart>>; Slot::COUNT] = Default::default();
        for slot in Slot::ALL {
            let key = keys::pin_of(slot);
            if self.given(key).is_some() {
                let from_shop = self.own.get(key).is_none();
                pins[slot as usize] = Some(named_parts(self.entries(key), from_shop));
            }
        }
        PartRules { allow_status, need_stock, pins, bans: self.bans() }
    }

    /// The one key whose values add up.
    fn bans(&self) -> Vec<NamedPart> {
        let of = |settings: &Settings, from_shop| match settings.get(&keys::PARTS_BAN) {
            Some(Given { value: Value::Texts(entries), .. }) => named_parts(entries, from_shop),
            _ => Vec::new(),
        };
        let mut bans = of(self.own, false);
        bans.extend(of(&self.shop.defaults, true));
        bans
    }
}

fn named_parts(entries: &[Entry], from_shop: bool) -> Vec<NamedPart> {
    let named = |Entry { text, mark: Mark { place, excerpt } }: &Entry| NamedPart {
        text: text.clone(),
        place: place.clone(),
        excerpt: excerpt.clone(),
        from_shop,
    };
    entries.iter().map(named).collect()
}
