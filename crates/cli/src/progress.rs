//! Progress of long work, on standard error.

use indicatif::{ProgressBar, ProgressDrawTarget, ProgressStyle};
use std::sync::atomic::{AtomicU64, Ordering};
use std::sync::mpsc::{RecvTimeoutError, channel};
use std::time::Duration;

/// Shorter work shows nothing.
const PATIENCE: Duration = Duration::from_secs(1);

/// Time between two pictures.
const TICK: Duration = Duration::from_millis(100);

/// Parts of the whole that a bar distinguishes.
const STEPS: u64 = 1000;

/// Does some work and shows, where `shown`, that it goes on. The work may tell which share of it is
/// done, 0 … 1, from any thread.
pub(crate) fn watched<T>(
    what: &'static str,
    shown: bool,
    work: impl FnOnce(&(dyn Fn(f64) + Sync)) -> T,
) -> T {
    let done = AtomicU64::new(0);
    let tell = |share: f64| {
        done.fetch_max((share * STEPS as f64) as u64, Ordering::Relaxed);
    };
    if !shown {
        return work(&tell);
    }
    let (finished, waiting) = channel::<()>();
    std::thread::scope(|scope| {
        let (done, waiting) = (&done, waiting);
        scope.spawn(move || {
            if waiting.recv_timeout(PATIENCE) != Err(RecvTimeoutError::Timeout) {
                return;
            }
            let bar = ProgressBar::with_draw_target(None, ProgressDrawTarget::stderr());
            bar.set_message(what);
            loop {
                let steps = done.load(Ordering::Relaxed);
                if steps > 0 && bar.length().is_none() {
                    bar.set_length(STEPS);
                    // A template that can't be read leaves the usual look.
                    let template = "{msg} [{bar:30}] {percent} %, about {eta} left";
                    if let Ok(style) = ProgressStyle::with_template(template) {
                        bar.set_style(style.progress_chars("=> "));
                    }
                }
                bar.set_position(steps);
                bar.tick();
                if waiting.recv_timeout(TICK) != Err(RecvTimeoutError::Timeout) {
                    break;
                }
            }
            bar.finish_and_clear();
        });
        let result = work(&tell);
        drop(finished);
        result
    })
}
