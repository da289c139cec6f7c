//! Accepts or refuses a certificate: exit status 0 or 1, or 2 where the command line is at fault.

use certificate_check::files::prove_files;
use std::path::PathBuf;
use std::process::ExitCode;

fn main() -> ExitCode {
    let arguments: Vec<PathBuf> = std::env::args_os().skip(1).map(PathBuf::from).collect();
    let (certificate, sheet, catalogs) = match arguments.as_slice() {
        [certificate, sheet, option, folder] if option.as_os_str() == "--catalogs" => {
            (certificate, sheet, folder)
        }
        _ => {
            eprintln!("usage: certificate-check CERTIFICATE SHEET --catalogs DIR");
            return ExitCode::from(2);
        }
    };
    let text = std::fs::read(certificate).map_err(|e| format!("{}: {e}", certificate.display()));
    match text.and_then(|text| prove_files(&text, sheet, catalogs).map_err(|r| r.to_string())) {
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
