//! `new`: writes a starter spec that issues cleanly.

use std::path::{Path, PathBuf};

use super::{Outcome, files, print};

/// Options of `new`.
#[derive(Debug, clap::Args)]
#[command(after_help = "Example: witnessline new specs/bracket.toml --number BR-0001")]
pub(super) struct Options {
    /// The file to write; it must not exist yet.
    file: PathBuf,
    /// Drawing number; without it the file's name is taken.
    #[arg(long)]
    number: Option<String>,
}

pub(super) fn run(options: &Options) -> Outcome {
    let path = &options.file;
    if path.exists() {
        print::err(&format!("error: {} exists already; name another file\n", path.display()));
        return Outcome::Wrong;
    }
    let number = options.number.clone().unwrap_or_else(|| number_from(path));
    if let Err(problem) = crate::spec::check_number(&number) {
        print::err(&format!("error: {problem}\n"));
        return Outcome::Wrong;
    }
    let text = crate::spec::starter(&number);
    match files::write_whole(path, |out| out.write_all(text.as_bytes())) {
        Ok(_) => {
            let shown = path.display();
            print::out(&format!("wrote {shown}; next: witnessline issue {shown}\n"));
            Outcome::Done
        }
        Err(e) => {
            print::err(&format!("error: {e}\n"));
            Outcome::Files
        }
    }
}

fn number_from(path: &Path) -> String {
    path.file_stem().map_or_else(String::new, |s| s.to_string_lossy().into_owned())
}
