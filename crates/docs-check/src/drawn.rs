//! Pictures that pages show, drawn by the program.
//!
//! They stand in `docs/pictures`. `cargo run -p docs-check -- renew` draws them anew; a test compares them
//! with what the program draws now.

use crate::shell::Shell;
use std::io;

/// A picture of the pages.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Drawing {
    /// The file in [`FOLDER`].
    pub file: &'static str,
    /// What is drawn: a sheet or design of the sample shop.
    subject: &'static str,
    /// Which picture of it.
    picture: &'static str,
}

/// The folder of the pictures, from the root of the repository.
pub const FOLDER: &str = "docs/pictures";

const GAUGE: &str = "sheets/tide-gauge-12v.toml";

/// Every picture of the pages.
pub const DRAWINGS: [Drawing; 7] = [
    Drawing { file: "circuit.svg", subject: GAUGE, picture: "circuit" },
    Drawing { file: "operating-area.svg", subject: GAUGE, picture: "operating-area" },
    Drawing { file: "headroom.svg", subject: GAUGE, picture: "headroom" },
    Drawing { file: "output.svg", subject: GAUGE, picture: "output" },
    Drawing {
        file: "output-adjustable.svg",
        subject: "sheets/bench-5-15v.toml",
        picture: "output",
    },
    Drawing { file: "stress.svg", subject: GAUGE, picture: "stress" },
    Drawing { file: "front.svg", subject: GAUGE, picture: "front" },
];

impl Drawing {
    /// The picture as the program draws it now.
    ///
    /// # Errors
    /// Where no shell can be started, or the program draws nothing: what it said is the message.
    pub fn now(&self, shell: &Shell) -> io::Result<Vec<u8>> {
        let Self { file, subject, picture } = self;
        let ran = shell.run(&format!(
            "railwright plot catalogs-sample/{subject} --catalogs catalogs-sample --picture {picture} \
             --out {file} --overwrite"
        ))?;
        if ran.status != Some(0) {
            return Err(io::Error::other(format!("{file} is not drawn: {}", ran.said)));
        }
        shell.file(file)
    }
}
