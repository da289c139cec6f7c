//! Where a figure of the requirement comes from: sheet, shop, command line, or the key's default.

use serde::Serialize;
use sheet::Sheet;
use toml::de::{DeTable, DeValue};

/// What gave a key its value.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize)]
#[serde(rename_all = "kebab-case")]
pub enum Giver {
    /// The rail sheet.
    Sheet,
    /// The shop file.
    Shop,
    /// `--set`.
    Set,
    /// Nobody: the key's default holds.
    Default,
    /// A derating policy that is built in.
    BuiltIn,
}

/// Where the value of a key comes from.
#[derive(Debug, Clone, PartialEq, Eq, Serialize)]
pub struct KeyOrigin {
    /// The key, or `policy.NAME.FIELD` for a fraction of a derating policy.
    pub key: String,
    /// What gave it.
    pub giver: Giver,
    /// The file, where a file gave it.
    pub file: Option<String>,
    /// Its line.
    pub line: Option<usize>,
}

/// A TOML file in which keys are looked up.
struct Keys {
    file: String,
    text: String,
}

impl Keys {
    /// The value of a dotted key with its line, handed to `read`.
    fn find<R>(&self, key: &str, read: impl FnOnce(&DeValue<'_>, usize) -> R) -> Option<R> {
        let text = self.text.strip_prefix('\u{feff}').unwrap_or(&self.text);
        let document = DeTable::parse(text).ok()?;
        let mut table = document.get_ref();
        let mut segments = key.split('.').peekable();
        while let Some(segment) = segments.next() {
            let (_, value) = table.iter().find(|(name, _)| name.get_ref() == segment)?;
            if segments.peek().is_none() {
                let before = text.get(..value.span().start)?;
                return Some(read(value.get_ref(), before.matches('\n').count() + 1));
            }
            let DeValue::Table(inner) = value.get_ref() else { return None };
            table = inner;
        }
        None
    }

    fn line(&self, key: &str) -> Option<usize> {
        self.find(key, |_, line| line)
    }

    fn text_of(&self, key: &str) -> Option<String> {
        self.find(key, |value, _| value.as_str().map(str::to_owned)).flatten()
    }
}

/// The files behind a sheet.
pub struct Origins<'a> {
    sheet: &'a Sheet,
    own: Keys,
    shop: Option<Keys>,
}

impl<'a> Origins<'a> {
    /// `own` and `shop` are the names and texts of the rail sheet and of the shop file.
    pub fn new(sheet: &'a Sheet, own: (&str, &str), shop: Option<(&str, &str)>) -> Self {
        let keys = |(file, text): (&str, &str)| Keys { file: file.into(), text: text.into() };
        Self { sheet, own: keys(own), shop: shop.map(keys) }
    }

    /// Where the value of a key comes from.
    pub fn of(&self, key: &str) -> KeyOrigin {
        let origin = |giver, keys: Option<&Keys>, line| KeyOrigin {
            key: key.to_owned(),
            giver,
            file: keys.map(|k| k.file.clone()),
            line,
        };
        if self.is_set(key) {
            return origin(Giver::Set, None, None);
        }
        if self.sheet.assumed.iter().any(|assumed| assumed.key == key) {
            return origin(Giver::Default, None, None);
        }
        if let Some(line) = self.own.line(key) {
            return origin(Giver::Sheet, Some(&self.own), Some(line));
        }
        match self.shop.as_ref().and_then(|shop| Some((shop, shop.line(key)?))) {
            Some((shop, line)) => origin(Giver::Shop, Some(shop), Some(line)),
            None => origin(Giver::Default, None, None),
        }
    }

    fn is_set(&self, key: &str) -> bool {
        let names =
            |argument: &String| argument.split_once('=').map(|(name, _)| name.trim() == key);
        self.sheet.set.iter().any(|argument| names(argument) == Some(true))
    }

    /// Where a fraction or a number of degrees of the derating policy comes from.
    pub fn of_policy(&self, field: &str) -> KeyOrigin {
        let derating = self.of("derating");
        let Some(name) = self.policy_name(&derating) else {
            return self.of_written_policy(field, derating);
        };
        let key = format!("policy.{name}.{field}");
        let of_shop = self.shop.as_ref().filter(|s| s.line(&format!("policy.{name}")).is_some());
        let Some(shop) = of_shop else {
            return KeyOrigin { key, giver: Giver::BuiltIn, file: None, line: None };
        };
        let line = shop.line(&key);
        let giver = if line.is_some() { Giver::Shop } else { Giver::Default };
        KeyOrigin { key, giver, file: Some(shop.file.clone()), line }
    }

    /// The name of the policy; None where it is written out in place of a name.
    fn policy_name(&self, derating: &KeyOrigin) -> Option<String> {
        match derating.giver {
            Giver::Set => {
                let argument = |a: &String| {
                    let (key, value) = a.split_once('=')?;
                    (key.trim() == "derating").then(|| value.trim().trim_matches('"').to_owned())
                };
                let value = self.sheet.set.iter().find_map(argument)?;
                (!value.starts_with('{')).then_some(value)
            }
            Giver::Sheet => self.own.text_of("derating"),
            Giver::Shop => self.shop.as_ref()?.text_of("derating"),
            Giver::Default | Giver::BuiltIn => Some("none".to_owned()),
        }
    }

    /// A field of a policy that sheet, shop or command line write out.
    fn of_written_policy(&self, field: &str, derating: KeyOrigin) -> KeyOrigin {
        let key = format!("derating.{field}");
        let file = match derating.giver {
            Giver::Sheet => Some(&self.own),
            Giver::Shop => self.shop.as_ref(),
            _ => None,
        };
        // What is written on the command line has no line; what a policy leaves out is used in full.
        match (file.and_then(|file| file.line(&key)), derating.giver) {
            (Some(line), _) => KeyOrigin { key, line: Some(line), ..derating },
            (None, Giver::Set) => KeyOrigin { key, ..derating },
            (None, _) => KeyOrigin { key, giver: Giver::Default, ..derating },
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use sheet::ShopFile;

    const SHOP: &str = "[policy.house]\nsoa = 0.7\n[thermal]\ninterface_c_per_w = 0.8\n";
    const RAIL: &str = "[rail]\nname = \"x\"\n[feed]\nmin_v = 17\nnominal_v = 20\nmax_v = 25\n\
                        [output]\nvoltage_v = 12\ntolerance_pct = 6\n[load]\nmax_a = 1\n\
                        [ambient]\nmin_c = 0\nmax_c = 40\n";

    fn origin(derating: &str, set: &[&str], of: impl Fn(&Origins<'_>) -> KeyOrigin) -> KeyOrigin {
        let mut notices = Vec::new();
        let text = format!("{derating}\n{RAIL}");
        let shop = ShopFile::read("shop.toml", SHOP, &mut notices).expect("a sound shop");
        let set: Vec<String> = set.iter().map(|s| (*s).to_owned()).collect();
        let sheet = sheet::read("s.toml", &text, &shop, &set, &mut notices).expect("a sound sheet");
        of(&Origins::new(&sheet, ("s.toml", &text), Some(("shop.toml", SHOP))))
    }

    #[test]
    fn each_key_is_told_by_who_gives_it() {
        let of = |key: &str, set: &[&str]| {
            let o = origin("derating = \"house\"", set, |origins| origins.of(key));
            (o.giver, o.line)
        };
        assert_eq!(of("feed.min_v", &[]), (Giver::Sheet, Some(5)));
        assert_eq!(of("thermal.interface_c_per_w", &[]), (Giver::Shop, Some(4)));
        assert_eq!(of("divider.min_a", &[]), (Giver::Default, None));
        assert_eq!(of("feed.min_v", &["feed.min_v=16"]), (Giver::Set, None));
    }

    #[test]
    fn a_policy_is_told_by_who_defines_it() {
        let of = |derating: &str, field: &str, set: &[&str]| {
            let o = origin(derating, set, |origins| origins.of_policy(field));
            (o.key, o.giver, o.line)
        };
        let house = "derating = \"house\"";
        assert_eq!(of(house, "soa", &[]), ("policy.house.soa".into(), Giver::Shop, Some(2)));
        let left_out = of(house, "amp_current", &[]);
        assert_eq!(left_out, ("policy.house.amp_current".into(), Giver::Default, None));
        let bench = of(house, "soa", &["derating=bench"]);
        assert_eq!(bench, ("policy.bench.soa".into(), Giver::BuiltIn, None));
        let own = of("derating = { soa = 0.5 }", "soa", &[]);
        assert_eq!(own, ("derating.soa".into(), Giver::Sheet, Some(1)));
    }
}
