//! The command line, exactly as typed.

use std::path::PathBuf;

use clap::{Args, Parser, Subcommand};
use clap_complete::Shell;

/// Fields, forces and inductances of round electromagnetic parts, each number with its error bar.
#[derive(Debug, Parser)]
#[command(
    name = "coilwright",
    version,
    arg_required_else_help = true,
    max_term_width = 110,
    after_help = "Exit status:
  0  done
  1  anything unexpected, such as a full disk
  2  the command line or the case is wrong, or the folder is in use; nothing was solved
  3  solved, but the accuracy goal or convergence was not reached; everything is written, and flagged
  4  some points of a sweep failed; the others are complete"
)]
pub struct CommandLine {
    /// What to do.
    #[command(subcommand)]
    pub command: Command,
}

/// What to do.
#[derive(Debug, Subcommand)]
pub enum Command {
    /// Solve a case: print a report, write the numbers, a picture and the field
    Solve(Solve),
    /// Draw the cross-section of a case without solving it
    Draw(Draw),
    /// Solve a case for every combination of the values that it varies
    Sweep(Sweep),
    /// Join the slices of a sweep into one table
    Gather(Gather),
    /// List the built-in materials, or show one with its data and their source
    Stock(Stock),
    /// Print the JSON Schema of the case file, for editors
    Schema,
    /// Print a completion script for a shell
    Completions(Completions),
}

/// The case and what is changed in it.
#[derive(Debug, Args)]
pub struct CaseArgs {
    /// The case file; `-` reads it from standard input
    #[arg(value_name = "CASE.toml")]
    pub case: PathBuf,
    /// Replace the text of a given; may be repeated, the last one wins
    #[arg(long = "set", value_name = "NAME=VALUE")]
    pub sets: Vec<String>,
}

/// `solve`
#[derive(Debug, Args)]
pub struct Solve {
    /// The case.
    #[command(flatten)]
    pub case: CaseArgs,
    /// Folder for the files [default: the case's name with the ending .out, beside the case; case.out in the
    /// current folder when the case comes from standard input]
    #[arg(long, value_name = "DIR")]
    pub out: Option<PathBuf>,
    /// Print report.json and nothing else; no files are written unless --out is given
    #[arg(long)]
    pub json: bool,
    /// No progress and no printed report; files, --json and errors stay
    #[arg(long, short)]
    pub quiet: bool,
    /// Threads to compute with [default: one for each core]
    #[arg(long, value_name = "N", value_parser = at_least_one)]
    pub threads: Option<usize>,
}

/// `draw`
#[derive(Debug, Args)]
pub struct Draw {
    /// The case.
    #[command(flatten)]
    pub case: CaseArgs,
    /// The picture; `-` prints it [default: the case's name with the ending .svg, beside the case; case.svg in the
    /// current folder when the case comes from standard input]
    #[arg(long, value_name = "FILE.svg")]
    pub out: Option<PathBuf>,
}

/// `sweep`
#[derive(Debug, Args)]
pub struct Sweep {
    /// The case.
    #[command(flatten)]
    pub case: CaseArgs,
    /// Run only the K-th of N parts
    #[arg(long, value_name = "K/N")]
    pub slice: Option<String>,
    /// Points that are solved at the same time
    #[arg(long, value_name = "N", value_parser = at_least_one)]
    pub workers: Option<usize>,
    /// Threads of each worker
    #[arg(long, value_name = "N", value_parser = at_least_one)]
    pub threads: Option<usize>,
    /// Start over, even where points are done already
    #[arg(long)]
    pub fresh: bool,
    /// Kinds of files to keep for every point
    #[arg(long, value_name = "KIND", value_delimiter = ',')]
    pub keep: Vec<String>,
    /// Folder for the files
    #[arg(long, value_name = "DIR")]
    pub out: Option<PathBuf>,
    /// No progress
    #[arg(long, short)]
    pub quiet: bool,
}

/// `gather`
#[derive(Debug, Args)]
pub struct Gather {
    /// Folders of the slices
    #[arg(value_name = "DIR", required = true)]
    pub folders: Vec<PathBuf>,
    /// The table to write
    #[arg(long, value_name = "FILE.csv", required = true)]
    pub out: PathBuf,
}

/// `stock`
#[derive(Debug, Args)]
pub struct Stock {
    /// One material; without it, all are listed
    pub name: Option<String>,
}

/// `completions`
#[derive(Debug, Args)]
pub struct Completions {
    /// The shell
    #[arg(value_name = "SHELL")]
    pub shell: Shell,
}

fn at_least_one(text: &str) -> Result<usize, String> {
    match text.parse::<usize>() {
        Ok(count) if count >= 1 => Ok(count),
        _ => Err("a whole number of at least 1 is needed".to_owned()),
    }
}

#[cfg(test)]
mod tests {
    use clap::CommandFactory;

    use super::*;

    #[test]
    fn is_consistent() {
        CommandLine::command().debug_assert();
    }

    #[test]
    fn reads_solve_from_standard_input() {
        let line = CommandLine::try_parse_from([
            "coilwright",
            "solve",
            "-",
            "--set",
            "gap=-1 mm",
            "--set",
            "n=2",
            "--json",
            "--threads",
            "3",
        ])
        .unwrap();
        let Command::Solve(solve) = line.command else {
            panic!("not solve")
        };
        assert_eq!(solve.case.case, PathBuf::from("-"));
        assert_eq!(solve.case.sets, ["gap=-1 mm", "n=2"]);
        assert!(solve.json && !solve.quiet && solve.out.is_none());
        assert_eq!(solve.threads, Some(3));
    }

    #[test]
    fn refuses_no_threads_and_unknown_words() {
        for line in [
            &["coilwright", "solve", "a.toml", "--threads", "0"][..],
            &["coilwright", "solve", "a.toml", "--treads", "1"],
            &["coilwright", "solve"],
            &["coilwright", "gather", "a"],
        ] {
            assert_eq!(
                CommandLine::try_parse_from(line).unwrap_err().exit_code(),
                2,
                "{line:?}"
            );
        }
    }
}
