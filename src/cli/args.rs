//! What may be said on the command line, in the order and the words in which a machinist would look
//! for it. Nothing is judged here: [`super::request`] decides whether what was said makes sense.

use std::path::PathBuf;

use clap::{ArgAction, Args, CommandFactory, Parser, Subcommand, ValueEnum};

/// Which edge will the cutter really leave? Held against the drawing.
///
/// Give a drawing, a cutter and a program. The edge that the moving cutter leaves is computed as exact
/// lines and arcs and held against the drawing, both ways: where the cutter bites into the part, and
/// where it leaves material standing. Each fault is named with its size, place, block, cause and remedy.
#[derive(Debug, Parser)]
#[command(name = "sweptedge", version, about = "Which edge will the cutter really leave? Checks it against the drawing", long_about, max_term_width = 100, after_help = FOOT)]
pub struct Cli {
    /// What to do.
    #[command(subcommand)]
    pub command: Command,
}

impl Cli {
    /// The command line's definition. For the short help every option stands in one list, so that it fits
    /// the screen of a classic terminal; the long help sorts them under headings.
    pub fn definition(short_help: bool) -> clap::Command {
        let plain = |a: clap::Arg| a.help_heading(None::<&str>);
        let definition = Self::command();
        if !short_help {
            return definition;
        }
        let names: Vec<String> = definition.get_subcommands().map(|s| s.get_name().to_owned()).collect();
        names.into_iter().fold(definition, |all, name| all.mut_subcommand(name, |sub| sub.mut_args(plain)))
    }
}

const FOOT: &str = "\
Examples:
  sweptedge check follower.toml
  sweptedge check --part plate.dxf --program plate.nc --diameter 10
  sweptedge inspect plate.dxf plate.nc

Exit status: 0 pass, 1 fail or undecided, 2 could not judge (nothing written).
Only the geometry of a round tool is judged. A pass is no release to run.";

/// What to do.
#[derive(Debug, Subcommand)]
pub enum Command {
    /// Judge a program against a drawing
    ///
    /// Exit status: 0 pass, 1 fail or undecided, 2 could not judge.
    Check(Box<CheckArgs>),
    /// Write the edge that the program leaves, without a drawing
    Envelope(Box<EnvelopeArgs>),
    /// Say what was understood of drawings and programs
    Inspect(InspectArgs),
    /// Print the JSON Schema of a report, a job file or an edge
    ///
    /// For scripts that read what --json writes, and for editors that check job files.
    Schema {
        /// Which one
        #[arg(value_enum)]
        which: SchemaName,
    },
}

/// Which schema.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum SchemaName {
    /// What `check --json` writes
    Report,
    /// A job file, in its JSON form
    Job,
    /// What `envelope --json` writes
    Envelope,
}

/// When to colour the text.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Default, ValueEnum)]
pub enum ColorWhen {
    /// On a terminal, unless NO_COLOR is set
    #[default]
    Auto,
    /// Always
    Always,
    /// Never
    Never,
}

/// A length unit by its sign.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum UnitName {
    /// Millimetres
    Mm,
    /// Inches
    In,
}

/// Which side of the contour is material.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Default, ValueEnum)]
pub enum KeepName {
    /// Inside of the outermost loop: an outside profile
    Inside,
    /// Outside of it: a pocket or an opening
    Outside,
    /// Left of an open chain, seen in its own direction
    Left,
    /// Right of it
    Right,
    /// The side on which the cutting moves' centers do not run
    #[default]
    Auto,
}

/// What has to be cut.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Default, ValueEnum)]
pub enum ClearName {
    /// The contour only
    #[default]
    Wall,
    /// The whole open area, as on a pocket's floor
    Area,
}

/// Which coordinate a mirroring reverses.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum MirrorName {
    /// Left and right change places: x becomes -x
    X,
    /// Up and down change places: y becomes -y
    Y,
}

/// How a program is written.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Default, ValueEnum)]
pub enum ProgramFormatName {
    /// Words of ISO 6983: G1 X.. Y..
    #[default]
    Iso,
}

const MORE: &str = "More options and examples: --help";

const CHECK_FOOT: &str = "\
Examples:
  sweptedge check follower.toml                     everything stands in a job file
  sweptedge check *.toml --quiet                    a whole folder: the worst exit status counts
  sweptedge check --part plate.dxf --program plate.nc --diameter 10 --tolerance 0.02
  sweptedge check --part pocket.svg --program pocket.nc -d 6 --clear area --svg picture.svg

Lengths are in --units, or else in the program's unit. What is said here goes before the job file.
Exit status: 0 pass, 1 fail or undecided, 2 could not judge (nothing written).";

/// `check`.
#[derive(Debug, Default, Args)]
#[command(after_help = MORE, after_long_help = CHECK_FOOT, disable_help_flag = true, allow_negative_numbers = true)]
pub struct CheckArgs {
    /// Job files: all a check needs, in TOML
    ///
    /// Each is judged; one that cannot be judged does not stop the others.
    #[arg(value_name = "JOB.toml")]
    pub jobs: Vec<PathBuf>,

    #[command(flatten)]
    pub part: PartArgs,
    #[command(flatten)]
    pub program: ProgramArgs,
    #[command(flatten)]
    pub limits: LimitArgs,

    /// Write the report as JSON (`-`: standard output)
    #[arg(long, value_name = "FILE", help_heading = "Output")]
    pub json: Option<PathBuf>,
    /// Write the picture as SVG
    #[arg(long, value_name = "FILE", help_heading = "Output")]
    pub svg: Option<PathBuf>,
    /// Write the swept edge as DXF polylines with bulges
    #[arg(long, value_name = "FILE", help_heading = "Output", hide_short_help = true)]
    pub dxf: Option<PathBuf>,
    /// Print nothing: the exit status tells
    #[arg(long, short, help_heading = "Output")]
    pub quiet: bool,
    /// When to color the report
    #[arg(
        long,
        value_name = "WHEN",
        default_value = "auto",
        value_enum,
        help_heading = "Output",
        hide_short_help = true
    )]
    pub color: ColorWhen,
    #[command(flatten)]
    pub running: RunningArgs,
    /// Print help; --help says more
    #[arg(long, short, action = ArgAction::Help, help_heading = "Output")]
    help: Option<bool>,
}

/// Most threads that may be asked for: more than any machine of a shop has cores.
const MOST_THREADS: i64 = 1024;

/// How the work is done.
#[derive(Clone, Copy, Debug, Default, Args)]
#[command(next_help_heading = "Output")]
pub struct RunningArgs {
    /// Use this many cores; the results are the same [default: all]
    #[arg(
        long,
        value_name = "N",
        value_parser = clap::value_parser!(u16).range(0..=MOST_THREADS),
        hide_short_help = true
    )]
    pub threads: Option<u16>,
    /// Tell the milliseconds of each stage on standard error
    #[arg(long, hide_short_help = true)]
    pub timings: bool,
}

/// The drawing and where it lies.
#[derive(Debug, Default, Args)]
#[command(next_help_heading = "Part")]
pub struct PartArgs {
    /// The drawing: DXF, SVG or CSV (x, y, bulge)
    #[arg(long, value_name = "FILE")]
    pub part: Option<PathBuf>,
    /// This DXF layer, or SVG group or id [default: all]
    ///
    /// May be said several times.
    #[arg(long, value_name = "NAME", action = ArgAction::Append)]
    pub layer: Vec<String>,
    /// Which side is material [default: auto]
    ///
    /// Loops: inside of the outermost one (an outside profile) or
    /// outside of it (a pocket). Open chains: left or right, seen in their own direction. auto: the side on
    /// which the cutting moves' centers do not run; the report says which.
    #[arg(long, value_enum, value_name = "SIDE", hide_possible_values = true)]
    pub keep: Option<KeepName>,
    /// Stock left on purpose on every wall
    #[arg(long, value_name = "LENGTH", value_parser = number, hide_short_help = true)]
    pub allowance: Option<f64>,
    /// Mirror the drawing: x swaps left and right, y swaps up and down
    #[arg(long, value_enum, value_name = "x|y", hide_possible_values = true, hide_short_help = true)]
    pub mirror: Option<MirrorName>,
    /// Then turn it about its origin, counter-clockwise
    #[arg(long, value_name = "DEGREES", value_parser = number, hide_short_help = true)]
    pub turn: Option<f64>,
    /// Lay the drawing where the program cuts
    ///
    /// It is mirrored, then turned, then shifted.
    #[arg(long, value_name = "X,Y", value_parser = pair, allow_hyphen_values = true)]
    pub shift: Option<[f64; 2]>,
    /// Close gaps in the drawing up to this length [default: 0.01 mm]
    #[arg(long, value_name = "LENGTH", value_parser = number, hide_short_help = true)]
    pub join_gap: Option<f64>,
    /// Greatest error of arcs that stand for splines and ellipses [default: 0.0001 mm]
    #[arg(long, value_name = "LENGTH", value_parser = number, hide_short_help = true)]
    pub curve_error: Option<f64>,
}

/// The program, its cutter and the height at which we look.
#[derive(Debug, Default, Args)]
#[command(next_help_heading = "Program and cutter")]
pub struct ProgramArgs {
    /// The program (`-`: from standard input)
    #[arg(long, value_name = "FILE")]
    pub program: Option<PathBuf>,
    /// How it is written [default: iso]
    #[arg(long, value_enum, value_name = "FORMAT", hide_short_help = true)]
    pub program_format: Option<ProgramFormatName>,
    /// Diameter of the cutter in the holder
    ///
    /// For every tool of the program; several cutters are told apart in a job file.
    #[arg(long, short, value_name = "LENGTH", value_parser = number)]
    pub diameter: Option<f64>,
    /// Unit of lengths said here [default: the program's]
    ///
    /// Also the unit of the report, and of files that declare none.
    #[arg(long, value_enum, value_name = "mm|in", hide_possible_values = true)]
    pub units: Option<UnitName>,
    /// Height of the part's top face: a feed move whose tip is below it cuts [default: 0]
    #[arg(long, value_name = "Z", value_parser = number, hide_short_help = true)]
    pub top: Option<f64>,
    /// Height at which to look [default: just below the top]
    #[arg(long, value_name = "Z", value_parser = number, hide_short_help = true)]
    pub level: Option<f64>,
    /// Accept arcs whose two radii differ by up to this [default: 0.002 mm or 0.0002 in]
    #[arg(long, value_name = "LENGTH", value_parser = number, hide_short_help = true)]
    pub arc_tolerance: Option<f64>,
}

/// What is allowed.
#[derive(Debug, Default, Args)]
#[command(next_help_heading = "Limits")]
pub struct LimitArgs {
    /// All three limits [default: 0.05 mm or 0.002 in]
    ///
    /// Greatest gouge, excess and cusp allowed.
    #[arg(long, short, value_name = "LENGTH", value_parser = number)]
    pub tolerance: Option<f64>,
    /// Greatest depth of the cutter in the part
    #[arg(long, value_name = "LENGTH", value_parser = number, hide_short_help = true)]
    pub gouge_tolerance: Option<f64>,
    /// Greatest height of material left standing
    #[arg(long, value_name = "LENGTH", value_parser = number, hide_short_help = true)]
    pub excess_tolerance: Option<f64>,
    /// Greatest height of crests between passes
    #[arg(long, value_name = "LENGTH", value_parser = number, hide_short_help = true)]
    pub cusp_tolerance: Option<f64>,
    /// Cut the contour or all of the area? [default: wall]
    ///
    /// wall: only the contour must be cut. area: the whole open area, as on a pocket's floor.
    #[arg(long, value_enum, value_name = "wall|area", hide_possible_values = true)]
    pub clear: Option<ClearName>,
    /// Leave out loops the program never comes near
    ///
    /// Holes, for example, that another tool makes.
    #[arg(long)]
    pub only_visited: bool,
}

const ENVELOPE_FOOT: &str = "\
Examples:
  sweptedge envelope --program plate.nc --diameter 10
  sweptedge envelope --program plate.nc --diameter 10 --dxf edge.dxf --svg edge.svg
  sweptedge envelope --program - --diameter 10 --json - < plate.nc

Lengths are in --units, or else in the program's unit. Outputs keep arcs as arcs.";

/// `envelope`.
#[derive(Debug, Default, Args)]
#[command(after_help = MORE, after_long_help = ENVELOPE_FOOT, disable_help_flag = true, allow_negative_numbers = true)]
pub struct EnvelopeArgs {
    #[command(flatten)]
    pub program: ProgramArgs,

    /// Write the edge as JSON (`-`: standard output)
    #[arg(long, value_name = "FILE", help_heading = "Output")]
    pub json: Option<PathBuf>,
    /// Write a picture of the swept edge as SVG
    #[arg(long, value_name = "FILE", help_heading = "Output")]
    pub svg: Option<PathBuf>,
    /// Write the swept edge as DXF polylines with bulges
    #[arg(long, value_name = "FILE", help_heading = "Output")]
    pub dxf: Option<PathBuf>,
    /// Write the swept edge as a table of x, y, bulge
    #[arg(long, value_name = "FILE", help_heading = "Output")]
    pub csv: Option<PathBuf>,
    /// Print no summary
    #[arg(long, short, help_heading = "Output")]
    pub quiet: bool,
    #[command(flatten)]
    pub running: RunningArgs,
    /// Print help; --help says more
    #[arg(long, short, action = ArgAction::Help, help_heading = "Output")]
    help: Option<bool>,
}

const INSPECT_FOOT: &str = "\
Examples:
  sweptedge inspect plate.dxf
  sweptedge inspect plate.dxf --layer FINISHED
  sweptedge inspect plate.dxf plate.nc --units in

Files named .dxf, .svg and .csv are read as drawings, all others as programs.";

/// `inspect`.
#[derive(Debug, Default, Args)]
#[command(after_help = MORE, after_long_help = INSPECT_FOOT, allow_negative_numbers = true)]
pub struct InspectArgs {
    /// Drawings and programs
    #[arg(value_name = "FILE", required = true)]
    pub files: Vec<PathBuf>,
    /// This DXF layer, or SVG group or id [default: all]
    ///
    /// May be said several times.
    #[arg(long, value_name = "NAME", action = ArgAction::Append)]
    pub layer: Vec<String>,
    /// Unit of files that declare none
    #[arg(long, value_enum, value_name = "mm|in", hide_possible_values = true)]
    pub units: Option<UnitName>,
    /// Close gaps in a drawing up to this length [default: 0.01 mm]
    #[arg(long, value_name = "LENGTH", value_parser = number, hide_short_help = true)]
    pub join_gap: Option<f64>,
    /// Greatest error of arcs that stand for splines and ellipses [default: 0.0001 mm]
    #[arg(long, value_name = "LENGTH", value_parser = number, hide_short_help = true)]
    pub curve_error: Option<f64>,
    /// Accept arcs off their circle by this
    ///
    /// Greatest difference of an arc's two radii [default: 0.002 mm or 0.0002 in].
    #[arg(long, value_name = "LENGTH", value_parser = number)]
    pub arc_tolerance: Option<f64>,
}

/// A finite number with a decimal point.
fn number(text: &str) -> Result<f64, String> {
    let trimmed = text.trim();
    match trimmed.parse::<f64>() {
        Ok(v) if v.is_finite() => Ok(v),
        Ok(_) => Err("this must be a finite number".into()),
        Err(_) if trimmed.replace(',', ".").parse::<f64>().is_ok() => {
            Err(format!("write it with a decimal point: {}", trimmed.replace(',', ".")))
        }
        Err(_) => Err("this must be a number, such as 10 or 9.98, without a unit".into()),
    }
}

/// Two numbers with a comma between them.
fn pair(text: &str) -> Result<[f64; 2], String> {
    match text.split(',').collect::<Vec<_>>().as_slice() {
        [x, y] => Ok([number(x)?, number(y)?]),
        _ => Err("write both with a comma between them and no space, such as 12.5,-3".into()),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_definition_holds_together() {
        Cli::command().debug_assert();
    }

    #[test]
    fn every_short_help_fits_a_screen_of_24_by_80() {
        let mut cli = Cli::definition(true).term_width(80);
        cli.build();
        for sub in std::iter::once(&cli).chain(cli.get_subcommands()) {
            let help = sub.clone().render_help().to_string();
            assert!(help.lines().count() <= 24, "{} {}\n{help}", sub.get_name(), help.lines().count());
            assert!(help.lines().all(|l| l.chars().count() <= 80), "{help}");
        }
    }

    #[test]
    fn every_long_help_of_a_job_ends_with_examples() {
        let mut cli = Cli::command().term_width(80);
        cli.build();
        for name in ["check", "envelope", "inspect"] {
            let sub = cli.find_subcommand(name).unwrap().clone();
            let help = sub.clone().render_long_help().to_string();
            assert!(help.contains("Examples:\n  sweptedge "), "{help}");
            for argument in sub.get_arguments() {
                let said = argument.get_long().map_or_else(String::new, |long| format!("--{long}"));
                assert!(help.contains(&said), "{said} is nowhere explained");
            }
        }
    }

    #[test]
    fn a_decimal_comma_is_explained_not_guessed() {
        assert_eq!(number("9,5"), Err("write it with a decimal point: 9.5".into()));
        assert_eq!(number("1e999"), Err("this must be a finite number".into()));
        assert_eq!(pair("1.5,-2"), Ok([1.5, -2.0]));
        assert!(pair("1.5").is_err());
    }

    #[test]
    fn negative_numbers_are_values_not_flags() {
        let cli = Cli::try_parse_from([
            "sweptedge",
            "check",
            "--part",
            "a",
            "--program",
            "b",
            "--diameter",
            "-5",
            "--shift",
            "-3,4",
        ]);
        let Ok(Cli { command: Command::Check(args) }) = cli else { panic!("{cli:?}") };
        assert_eq!(args.program.diameter, Some(-5.0));
        assert_eq!(args.part.shift, Some([-3.0, 4.0]));
    }
}
