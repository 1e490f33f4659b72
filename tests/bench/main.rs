//! Time and memory of whole runs and of their steps: `cargo bench`. Prints measurements beside budgets and growth as
//! ratios; it judges nothing, because a shared machine is no stopwatch. Every whole run is a process of its own, so that
//! its peak memory is its own (VmHWM of proc(5), in kB; left out where there is none).

mod devices;
mod shapes;
mod steps;

use std::fs;
use std::path::Path;
use std::process::Command;
use std::process::ExitCode;
use std::time::Duration;
use std::time::Instant;

use edgesheet::quantity::Polarity;

use crate::devices::Size;
use crate::steps::Clock;
use crate::steps::Solver;
use crate::steps::Texts;

/// The first argument that makes this program run `edgesheet` once and report its peak memory.
const ONCE: &str = "--once";

fn main() -> ExitCode {
    let arguments: Vec<std::ffi::OsString> = std::env::args_os().collect();
    if arguments.get(1).is_some_and(|first| first == ONCE) {
        let ended = edgesheet::cli::run(["edgesheet".into()].into_iter().chain(arguments.into_iter().skip(2)));
        eprintln!("peak {}", peak_kb().unwrap_or(0));
        return ended;
    }
    let folder = Path::new(env!("CARGO_TARGET_TMPDIR")).join("bench");
    demo(&folder);
    agreeing_bar(&folder);
    thirty_two_contacts(&folder);
    layouts();
    growth();
    ExitCode::SUCCESS
}

/// Largest resident memory of this process so far, in kB.
fn peak_kb() -> Option<u64> {
    let status = fs::read_to_string("/proc/self/status").ok()?;
    let line = status.lines().find(|line| line.starts_with("VmHWM:"))?;
    line.split_whitespace().nth(1)?.parse().ok()
}

fn demo(folder: &Path) {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("demo-devices/top-gated-bar");
    let read = |name: &str| fs::read_to_string(root.join(name)).expect("a demo file");
    let texts = Texts {
        device: read("device.toml"),
        cooldown: Some(read("cooldown.toml")),
        readings: Some(read("readings.csv")),
    };
    println!("== sheet of the demo");
    whole_run(&put(&folder.join("demo"), &texts), "");
    of_steps(&texts);
}

/// The budget case: 14 contacts, 60 readings that agree.
fn agreeing_bar(folder: &Path) {
    println!("\n== sheet of a bar with 14 contacts and 60 agreeing readings");
    let texts = agreeing(Size { contacts: 14, gates: 2, points: 1, edge: "" }, 60);
    whole_run(&put(&folder.join("fourteen"), &texts), " (budget 60 ms, 30 MB)");
    of_steps(&texts);
}

/// A bar with readings as its meters should show them.
fn agreeing(size: Size, count: usize) -> Texts {
    let mut texts = Texts { device: devices::device(size), cooldown: Some(devices::cooldown(size)), readings: None };
    let solver = Solver::of(&texts, &mut Clock::default());
    let name = |at: edgesheet::device::ContactIdx| solver.device.contacts[at.0].name.clone();
    let mut rows = Vec::new();
    for point in 0..size.points {
        for polarity in Polarity::BOTH {
            let mut readings = edgesheet::resistance::standard_readings(&solver.network);
            let more = edgesheet::resistance::every_reading(size.contacts);
            readings.extend(more.into_iter().filter(|other| !readings.contains(other)).take(3).collect::<Vec<_>>());
            let solved = edgesheet::resistance::predict(&solver.network, &solver.setup(point, polarity), &readings);
            for expected in &solved.expected {
                let [i, j] = expected.reading.current;
                let [k, l] = expected.reading.voltage;
                let contacts = [name(i), name(j), name(k), name(l)];
                rows.extend(expected.shown_ohm.map(|ohm| (format!("p{point}"), polarity.sign(), contacts, ohm)));
            }
        }
    }
    assert!(rows.len() >= count, "only {} readings", rows.len());
    rows.truncate(count);
    texts.readings = Some(devices::readings(&rows));
    texts
}

fn thirty_two_contacts(folder: &Path) {
    println!("\n== 32 contacts, every reading, both polarities, exact");
    let texts = Texts {
        device: devices::device(Size { contacts: 32, gates: 2, points: 1, edge: "" }),
        cooldown: None,
        readings: None,
    };
    let mut clock = Clock::default();
    let solver = Solver::of(&texts, &mut clock);
    let readings = edgesheet::resistance::every_reading(32);
    for polarity in Polarity::BOTH {
        solver.solve(0, polarity, &readings, &mut clock);
    }
    let solution = |name: &str| clock.steps.iter().find(|(step, _)| *step == name).map_or(Duration::ZERO, |(_, t)| *t);
    let sum = solution("layout") + solution("network") + solution("channels") + solution("conductance");
    println!("{} readings; layout to conductance {} (budget of the solution 50 ms)", 2 * readings.len(), shown(sum));
    print_steps(&clock);
    let folder = put(&folder.join("thirty-two"), &texts);
    println!("whole commands (budget of --all 1 s):");
    for options in ["--all", "--all --json"] {
        run_once(&folder, &format!("expect device.toml {options}"));
    }
    run_once(&folder, "isolate device.toml G0");
}

fn layouts() {
    println!("\n== layouts of many sides");
    for case in shapes::cases() {
        let time = least(20, || {
            std::hint::black_box(edgesheet::layout::layout(&case.device).expect("a layout"));
        });
        println!("{}", shapes::line(&case, time));
    }
}

/// Time from texts to all standard readings, relative to the smallest case: without mixing, mixing fully (fractions) and
/// over a length (floats).
fn growth() {
    println!("\n== growth of the solution, as ratios to the first of each row");
    let base = Size { contacts: 14, gates: 2, points: 1, edge: "" };
    row("contacts", &[8, 16, 32, 64, 128], |contacts| Size { contacts, ..base });
    row("gates", &[1, 2, 5, 10, 20, 40], |gates| Size { gates, ..base });
    for (name, edge) in [("full mixing", "mixing = \"full\""), ("over 100 µm", "mixing = { length_um = 100 }")] {
        println!("{name}:");
        row("contacts", &[8, 16, 32, 64, 128], |contacts| Size { contacts, edge, ..base });
        row("gates", &[1, 2, 5, 10, 20, 40], |gates| Size { gates, edge, ..base });
    }
    println!("steps of 40 gates at one polarity, in fractions and in floats:");
    for edge in ["", "mixing = \"full\"", "mixing = { length_um = 100 }"] {
        let texts = Texts { device: devices::device(Size { gates: 40, edge, ..base }), cooldown: None, readings: None };
        let mut clock = Clock::default();
        let solver = Solver::of(&texts, &mut clock);
        let readings = edgesheet::resistance::standard_readings(&solver.network);
        solver.solve(0, Polarity::Toward, &readings, &mut clock);
        println!("{edge}");
        print_steps(&clock);
    }
    row("points", &[1, 2, 3, 4, 5, 6], |points| Size { points, ..base });
}

fn row(what: &str, values: &[usize], size: impl Fn(usize) -> Size) {
    let times: Vec<Duration> = values.iter().map(|&value| solution_time(size(value))).collect();
    let cell =
        |(value, time): (&usize, &Duration)| format!("{value}: {:.1}", time.as_secs_f64() / times[0].as_secs_f64());
    let cells: Vec<String> = values.iter().zip(&times).map(cell).collect();
    println!("{what:<9} {}   (first {}, last {})", cells.join("  "), shown(times[0]), shown(times[times.len() - 1]));
}

fn solution_time(size: Size) -> Duration {
    let texts = Texts { device: devices::device(size), cooldown: None, readings: None };
    least(3, || {
        let clock = &mut Clock::default();
        let solver = Solver::of(&texts, clock);
        let readings = edgesheet::resistance::standard_readings(&solver.network);
        for point in 0..size.points {
            for polarity in Polarity::BOTH {
                solver.solve(point, polarity, &readings, clock);
            }
        }
    })
}

/// The shortest of several runs: the least disturbed one.
fn least(runs: u32, mut work: impl FnMut()) -> Duration {
    let once = |_| {
        let start = Instant::now();
        work();
        start.elapsed()
    };
    (0..runs).map(once).min().unwrap_or_default()
}

fn put(folder: &Path, texts: &Texts) -> std::path::PathBuf {
    fs::create_dir_all(folder).expect("a folder");
    let write = |name: &str, text: &Option<String>| {
        text.iter().for_each(|text| fs::write(folder.join(name), text).expect("a file"));
    };
    write("device.toml", &Some(texts.device.clone()));
    write("cooldown.toml", &texts.cooldown);
    write("readings.csv", &texts.readings);
    folder.to_owned()
}

fn whole_run(folder: &Path, budget: &str) {
    println!("whole command{budget}:");
    run_once(folder, "sheet device.toml cooldown.toml -o out --replace");
}

/// Runs a command in a process of its own, five times, and prints the least time and its peak memory.
fn run_once(folder: &Path, line: &str) {
    let mut peak = String::new();
    let mut answer = 0;
    let time = least(5, || {
        let mut command = Command::new(std::env::current_exe().expect("this program"));
        let output = command.current_dir(folder).arg(ONCE).args(line.split(' ')).output().expect("a run");
        let said = String::from_utf8_lossy(&output.stderr).into_owned();
        assert!(output.status.success(), "{said}");
        answer = output.stdout.len();
        peak = said.rsplit("peak ").next().unwrap_or_default().trim().to_owned();
    });
    let peak_mb = peak.parse::<f64>().map_or("unknown".to_owned(), |kb| format!("{:.1} MB", kb / 1024.0));
    println!("  {line:<52} {:>9}  peak {peak_mb}  answer {answer} B", shown(time));
}

fn of_steps(texts: &Texts) {
    steps::sheet(texts, &mut Clock::default());
    let mut clock = Clock::default();
    let [pdf, twin, record] = steps::sheet(texts, &mut clock);
    println!("steps (second run in one process), PDF {pdf} B, twin {twin} B, record {record} B:");
    print_steps(&clock);
}

fn print_steps(clock: &Clock) {
    let total: Duration = clock.steps.iter().map(|(_, time)| *time).sum();
    for (step, time) in &clock.steps {
        println!("  {step:<30} {:>9}  {:>3.0} %", shown(*time), 100.0 * time.as_secs_f64() / total.as_secs_f64());
    }
}

fn shown(time: Duration) -> String {
    format!("{:.2} ms", time.as_secs_f64() * 1e3)
}
