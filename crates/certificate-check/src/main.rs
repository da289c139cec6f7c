//! Accepts or refuses a certificate: exit status 0 or 1, or 2 where the command line is at fault.

use certificate_check::files::prove_files;
use std::path::PathBuf;
use std::process::ExitCode;

const USAGE: &str = "usage: certificate-check CERTIFICATE SHEET --catalogs DIR";

fn main() -> ExitCode {
    let arguments: Vec<PathBuf> = std::env::args_os().skip(1).map(PathBuf::from).collect();
    let [certificate, sheet, option, catalogs] = arguments.as_slice() else {
        eprintln!("{USAGE}");
        return ExitCode::from(2);
    };
    let text = match std::fs::read(certificate) {
        Ok(text) if option.as_os_str() == "--catalogs" => text,
        read => {
            let fault = read.err().map(|e| format!("{}: {e}; ", certificate.display()));
            eprintln!("{}{USAGE}", fault.unwrap_or_default());
            return ExitCode::from(2);
        }
    };
    match prove_files(&text, sheet, catalogs) {
        Ok(rows) => {
            (1..).zip(&rows).for_each(|(rank, row)| println!("{rank}  {row}"));
            println!("accepted: {} rows hold, and nothing that is left out is better", rows.len());
            ExitCode::SUCCESS
        }
        Err(refused) => {
            println!("refused: {refused}");
            ExitCode::FAILURE
        }
    }
}
