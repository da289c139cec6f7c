//! The loop: alter an input, feed it, keep it where it behaves in a new way.

use crate::mutate::altered;
use crate::target::{ACCEPTED, Behaviour, Target};
use fastrand::Rng;
use peak_alloc::PeakAlloc;
use std::collections::HashSet;
use std::io;
use std::panic::{AssertUnwindSafe, catch_unwind};
use std::path::Path;
use std::sync::{Arc, Mutex, PoisonError};
use std::time::{Duration, Instant};

/// An input may take this long, s: some thousand times what it usually takes.
pub const LONGEST_S: u64 = 60;

/// Memory that any input may take, bytes: buffers of the reader, tables, the search's own.
pub const MEMORY_BASE: usize = 32 * 1024 * 1024;

/// Memory beyond that for each byte of the input.
pub const MEMORY_PER_BYTE: usize = 256;

/// When a campaign is over.
#[derive(Debug, Clone, Copy)]
pub enum End {
    /// After so many inputs: the same ones for the same seed.
    Inputs(u64),
    /// After this time.
    Time(Duration),
}

/// What a campaign came to.
#[derive(Debug, Clone, Default)]
pub struct Outcome {
    /// Inputs fed.
    pub inputs: u64,
    /// Bytes fed.
    pub bytes: u64,
    /// Inputs kept because they behaved in a new way, the corpus included.
    pub kept: usize,
    /// Different words of behaviour seen: notice codes, binding checks, kinds of error.
    pub words: usize,
    /// The most memory that one input took, bytes.
    pub most_memory: usize,
    /// Inputs for which something failed to hold.
    pub findings: Vec<Finding>,
}

/// An input for which something failed to hold.
#[derive(Debug, Clone)]
pub struct Finding {
    /// The input.
    pub input: Vec<u8>,
    /// What failed.
    pub what: String,
}

/// At most so many findings: after that something is wrong throughout.
const MOST_FINDINGS: usize = 20;

/// Feeds a target from its corpus on.
///
/// # Errors
/// Where the scratch folder can't be written.
pub fn run(
    target: Target,
    corpus: Vec<Vec<u8>>,
    seed: u64,
    end: End,
    memory: &PeakAlloc,
    watch: &Watch,
) -> io::Result<Outcome> {
    let scratch = tempfile::tempdir()?;
    let mut campaign = Campaign {
        target,
        folder: scratch.path(),
        memory,
        watch,
        pool: Vec::new(),
        sound: Vec::new(),
        seen: HashSet::new(),
        words: HashSet::new(),
        outcome: Outcome::default(),
    };
    let begin = Instant::now();
    for input in corpus {
        campaign.feed(input)?;
    }
    let mut dice = Rng::with_seed(seed);
    let goes_on = |fed: u64| match end {
        End::Inputs(most) => fed < most,
        End::Time(time) => begin.elapsed() < time,
    };
    while goes_on(campaign.outcome.inputs) && campaign.outcome.findings.len() < MOST_FINDINGS {
        let input = campaign.next_input(&mut dice);
        campaign.feed(input)?;
    }
    Ok(campaign.outcome)
}

struct Campaign<'c> {
    target: Target,
    folder: &'c Path,
    memory: &'c PeakAlloc,
    watch: &'c Watch,
    /// Every input that behaved in a new way.
    pool: Vec<Vec<u8>>,
    /// Those of them that were not refused.
    sound: Vec<Vec<u8>>,
    seen: HashSet<Behaviour>,
    words: HashSet<String>,
    outcome: Outcome,
}

impl Campaign<'_> {
    fn next_input(&self, dice: &mut Rng) -> Vec<u8> {
        let mut pick = || {
            // The latest that behaved in a new way half the time: they lead further.
            let late =
                self.pool.len().saturating_sub(if dice.bool() { 16 } else { self.pool.len() });
            let place = dice.usize(late..self.pool.len().max(late + 1));
            self.pool.get(place).cloned().unwrap_or_default()
        };
        let (one, other) = (pick(), pick());
        altered(&one, &other, dice)
    }

    fn feed(&mut self, input: Vec<u8>) -> io::Result<()> {
        self.outcome.inputs += 1;
        self.outcome.bytes += input.len() as u64;
        self.watch.begin(self.target, &input);
        let before = self.memory.current_usage();
        self.memory.reset_peak_usage();
        let fed = catch_unwind(AssertUnwindSafe(|| self.target.feed(&input, self.folder)));
        let took = self.memory.peak_usage().saturating_sub(before);
        self.watch.end();
        self.outcome.most_memory = self.outcome.most_memory.max(took);
        let allowed = MEMORY_BASE + MEMORY_PER_BYTE * input.len();
        match fed {
            Err(panic) => self.find(input, told(panic.as_ref())),
            Ok(_) if took > allowed => {
                let what = format!("{took} bytes of memory for an input of {} bytes", input.len());
                self.find(input, what);
            }
            Ok(behaviour) => {
                let behaviour = behaviour?;
                self.words.extend(behaviour.iter().cloned());
                self.outcome.words = self.words.len();
                let is_sound = behaviour.contains(ACCEPTED);
                if self.seen.insert(behaviour) {
                    if is_sound {
                        self.sound.push(input.clone());
                    }
                    self.pool.push(input);
                    self.outcome.kept = self.pool.len();
                }
            }
        }
        Ok(())
    }

    /// Keeps one finding of a kind.
    fn find(&mut self, input: Vec<u8>, what: String) {
        if self.outcome.findings.iter().all(|f| f.what != what) {
            self.outcome.findings.push(Finding { input, what });
        }
    }
}

fn told(panic: &(dyn std::any::Any + Send)) -> String {
    let text = panic.downcast_ref::<String>().map(String::as_str);
    text.or_else(|| panic.downcast_ref::<&str>().copied()).unwrap_or("a panic").to_owned()
}

/// Ends the process where an input takes longer than [`LONGEST_S`], after keeping the input in a file: a
/// reader that hangs can't be stopped from within.
#[derive(Debug, Default)]
pub struct Watch {
    current: Arc<Mutex<Option<Feeding>>>,
}

/// An input that is being fed.
#[derive(Debug)]
struct Feeding {
    since: Instant,
    target: Target,
    input: Vec<u8>,
}

impl Watch {
    /// Begins to watch. `findings` is the folder for an input that hangs.
    pub fn over(findings: &Path) -> Self {
        let watch = Self::default();
        let current = Arc::clone(&watch.current);
        let findings = findings.to_owned();
        std::thread::spawn(move || {
            loop {
                std::thread::sleep(Duration::from_secs(1));
                let current = current.lock().unwrap_or_else(PoisonError::into_inner);
                if let Some(Feeding { since, target, input }) = &*current
                    && since.elapsed() > Duration::from_secs(LONGEST_S)
                {
                    let file = findings.join(format!("{}-hangs", target.name()));
                    eprintln!(
                        "fuzz: {} takes over {LONGEST_S} s; see {}",
                        target.name(),
                        file.display()
                    );
                    if let Err(error) = std::fs::write(&file, input) {
                        eprintln!("fuzz: {} can't be written: {error}", file.display());
                    }
                    std::process::exit(1);
                }
            }
        });
        watch
    }

    fn begin(&self, target: Target, input: &[u8]) {
        self.set(Some(Feeding { since: Instant::now(), target, input: input.to_vec() }));
    }

    fn end(&self) {
        self.set(None);
    }

    fn set(&self, value: Option<Feeding>) {
        *self.current.lock().unwrap_or_else(PoisonError::into_inner) = value;
    }
}
