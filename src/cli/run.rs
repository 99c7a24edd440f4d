//! Carries out what was asked, and turns the outcome into an exit status.

use std::path::{Path, PathBuf};

use super::args::{CheckArgs, Cli, Command, EnvelopeArgs, SchemaName};
use super::check;
use super::draft::{Draft, Named, command_line};
use super::exit::Exit;
use super::inspect;
use super::output::{self, Rendered};
use super::request::{self, Check, Outputs};
use super::stages::Stages;
use super::{files, job, judge};
use crate::findings::{Report, Verdict};
use crate::input::{Place, Problem, Refusal};
use crate::report::{self, SweptEdge, csv, dxf, svg};

/// Does what the command line says.
pub fn run(cli: &Cli) -> Exit {
    let threads = match &cli.command {
        Command::Check(args) => args.running.threads,
        Command::Envelope(args) => args.running.threads,
        Command::Inspect(_) | Command::Schema { .. } => None,
    };
    if let Err(problems) = hire(threads.unwrap_or(0)) {
        output::complain(&problems);
        return Exit::NotJudged;
    }
    match &cli.command {
        Command::Check(args) => run_check(args),
        Command::Envelope(args) => settle(run_envelope(args).map(|()| Exit::Pass)),
        Command::Inspect(args) => inspect::run(args),
        Command::Schema { which } => {
            let text = match which {
                SchemaName::Report => report::report_schema(),
                SchemaName::Job => job::SCHEMA,
                SchemaName::Envelope => report::envelope_schema(),
            };
            let written = output::to_standard_output(text.as_bytes());
            settle(written.map(|()| Exit::Pass))
        }
    }
}

/// Starts the threads that do the work, 0 for as many as there are cores.
fn hire(threads: u16) -> Result<(), Refusal> {
    let pool = rayon::ThreadPoolBuilder::new().num_threads(usize::from(threads));
    pool.build_global().map_err(|e| {
        vec![Problem::error(
            command_line(),
            format!("the threads for the work cannot be started: {e}"),
            "",
            "ask for fewer with --threads, or close other programs",
        )]
    })
}

/// Says what went wrong, if anything did.
fn settle(outcome: Result<Exit, Refusal>) -> Exit {
    outcome.unwrap_or_else(|problems| {
        output::complain(&problems);
        Exit::NotJudged
    })
}

fn run_check(args: &CheckArgs) -> Exit {
    if args.jobs.is_empty() {
        let request = request::check(Draft::from(args), String::new(), &command_line());
        return settle(request.and_then(|r| judged(&r, args, false)));
    }
    let several = args.jobs.len() > 1;
    if several && let Some(output) = [&args.json, &args.svg, &args.dxf].into_iter().flatten().next() {
        output::complain(&[Problem::error(
            command_line(),
            format!("several jobs would all write to {}", output.display()),
            "an output of its own for each job",
            "name the outputs in each job file, under [output], or run the jobs one by one",
        )]);
        return Exit::NotJudged;
    }
    let one = |job: &PathBuf| settle(from_job(job, args).and_then(|r| judged(&r, args, several)));
    args.jobs.iter().map(one).max().unwrap_or(Exit::NotJudged)
}

/// The request of a job file, under what the command line says.
fn from_job(job: &Path, args: &CheckArgs) -> Result<Check, Refusal> {
    let named = Named::within(Path::new(""), job);
    let bytes = files::read(&named)?;
    let folder = if named.is_standard() { None } else { job.parent() };
    let said = job::read(&bytes, &named.name, folder.unwrap_or(Path::new("")))?;
    request::check(Draft::from(args).or(said), named.name.clone(), &Place::file(&named.name))
}

/// Judges one request and writes its outputs.
fn judged(request: &Check, args: &CheckArgs, titled: bool) -> Result<Exit, Refusal> {
    let stages = Stages::new();
    let report = check::check(request, &stages)?;
    let outputs = render(&report, &request.outputs, &stages)?;
    let mut text = String::new();
    if !args.quiet && !request.outputs.take_standard_output() {
        if titled {
            text = format!("== {} ==\n", request.name);
        }
        let (width, colored) = (output::width(), output::colored(args.color));
        text.push_str(&stages.run("write text", || judge::text(&report, width, colored)));
        if titled {
            text.push('\n');
        }
    }
    stages.stop_showing();
    stages.run("write files", || output::write(text.as_bytes(), outputs))?;
    if args.running.timings {
        stages.tell();
    }
    Ok(match report.verdict {
        Verdict::Pass => Exit::Pass,
        Verdict::Fail | Verdict::Undecided => Exit::Fail,
    })
}

fn render(report: &Report, outputs: &Outputs, stages: &Stages) -> Result<Vec<Rendered>, Refusal> {
    let mut files = Vec::new();
    let mut add = |name, to: &Option<Named>, bytes: &dyn Fn() -> Result<Vec<u8>, Refusal>| {
        if let Some(to) = to {
            files.push(Rendered { to: to.clone(), bytes: stages.run(name, bytes)? });
        }
        Ok::<(), Refusal>(())
    };
    add("write JSON", &outputs.json, &|| judge::json(report))?;
    add("write SVG", &outputs.svg, &|| Ok(svg::render(report).into_bytes()))?;
    add("write DXF", &outputs.dxf, &|| Ok(dxf::render(&report.drawing.swept, report.unit).into_bytes()))?;
    Ok(files)
}

fn run_envelope(args: &EnvelopeArgs) -> Result<(), Refusal> {
    let place = command_line();
    let request = request::program(&Draft::from(args), &place)?;
    let here = |p: &PathBuf| Named::within(Path::new(""), p);
    let asked = Outputs {
        json: args.json.as_ref().map(here),
        svg: args.svg.as_ref().map(here),
        dxf: args.dxf.as_ref().map(here),
        csv: args.csv.as_ref().map(here),
    };
    let asked = request::outputs(asked, &request.file, &place)?;
    let stages = Stages::new();
    let reading = stages.run("read program", || check::read_program(&request, None))?;
    let program = reading.value;
    let family = stages.run("view", || check::view(&program, &request))?.cutting;
    let swept = stages.run("sweep", || judge::sweep(&family, &program))?;
    let edge = SweptEdge { region: &swept, family: &family, program: &program };
    let mut files = Vec::new();
    let mut add = |name, to: &Option<Named>, bytes: &dyn Fn() -> Result<Vec<u8>, Refusal>| {
        if let Some(to) = to {
            files.push(Rendered { to: to.clone(), bytes: stages.run(name, bytes)? });
        }
        Ok::<(), Refusal>(())
    };
    add("write JSON", &asked.json, &|| judge::edge_json(&edge))?;
    add("write SVG", &asked.svg, &|| Ok(svg::render_swept(&edge).into_bytes()))?;
    add("write DXF", &asked.dxf, &|| Ok(dxf::render(&swept, program.unit).into_bytes()))?;
    add("write CSV", &asked.csv, &|| Ok(csv::render(&swept).into_bytes()))?;
    stages.stop_showing();
    output::complain(&reading.problems);
    let summary = if args.quiet || asked.take_standard_output() {
        String::new()
    } else {
        inspect::swept(&swept, &program, files.is_empty())
    };
    stages.run("write files", || output::write(summary.as_bytes(), files))?;
    if args.running.timings {
        stages.tell();
    }
    Ok(())
}
