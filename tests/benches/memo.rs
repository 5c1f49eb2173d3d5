//! How long a record takes to become a memo: whole processes, and again in one that has made it before
//! (`cargo bench --bench memo`; with a memo's path after `--`, for the record attached to that).

use std::path::{Path, PathBuf};
use std::process::{Command, Stdio};
use std::time::{Duration, Instant};

use hade::prelude::*;
use hade_memo::{Memo, MemoInput, MemoOptions, Project, build, verify};

/// The variable that makes this program the one that is timed, with the folder of the files.
const ONE: &str = "HADE_BENCH_MEMO";
const NOTEBOOK: &[u8] = br#"{"cells":[],"metadata":{},"nbformat":4,"nbformat_minor":5}"#;
const ROUNDS: usize = 9;

fn main() {
    if let Some(folder) = std::env::var_os(ONE) {
        let folder = PathBuf::from(folder);
        let record = std::fs::read_to_string(folder.join("record.json")).expect("the record");
        return std::fs::write(folder.join("memo.pdf"), memo(&record, &folder).pdf).expect("the memo");
    }
    let folder = tempfile::tempdir().expect("a folder");
    let memo_given = std::env::args().skip(1).find(|argument| !argument.starts_with('-'));
    let record = match memo_given {
        Some(path) => unpacked(Path::new(&path), folder.path()),
        None => sheet().record().to_json().expect("a record"),
    };
    std::fs::write(folder.path().join("record.json"), &record).expect("the record");

    let sheets = memo(&record, folder.path()).pages;
    let load = std::fs::read_to_string("/proc/loadavg").unwrap_or_default();
    println!("{sheets} sheets, record of {} bytes; load {}", record.len(), load.trim());
    timed("a whole process, record to PDF", || {
        let program = std::env::current_exe().expect("this program");
        let status = Command::new(program).env(ONE, folder.path()).stdout(Stdio::null()).status().expect("it runs");
        assert!(status.success());
    });
    timed("again in one process, nothing changed", || drop(memo(&record, folder.path())));
    let mut title = 0;
    timed("again in one process, the title changed", || {
        title += 1;
        let other = record.replacen("\"title\": \"", &format!("\"title\": \"{title} "), 1);
        drop(memo(&other, folder.path()));
    });
}

fn timed(what: &str, mut work: impl FnMut()) {
    let mut times: Vec<Duration> = (0..ROUNDS)
        .map(|_| {
            let started = Instant::now();
            work();
            started.elapsed()
        })
        .collect();
    let first = times[0];
    times.sort();
    let ms = |time: Duration| time.as_secs_f64() * 1e3;
    println!("{what}: first {:.0} ms, median {:.0} ms, best {:.0} ms", ms(first), ms(times[ROUNDS / 2]), ms(times[0]));
}

fn memo(record: &str, folder: &Path) -> Memo {
    let project =
        Project::parse("[memo]\nnumber = \"B-1\"\ndate = 2026-03-01\n", Path::new("hade.toml")).expect("a project");
    let input = MemoInput { record_json: record, notebook: ("bench.ipynb", NOTEBOOK), folder, project: Some(&project) };
    build(&input, &MemoOptions::default()).expect("a memo")
}

/// Record and data of a memo, written into the folder.
fn unpacked(memo: &Path, folder: &Path) -> String {
    let contents = verify(std::fs::read(memo).expect("the memo")).expect("a memo").contents.expect("accepted");
    for (path, bytes) in &contents.data {
        let target = folder.join(path);
        std::fs::create_dir_all(target.parent().expect("a folder")).expect("a folder");
        std::fs::write(target, bytes).expect("a data file");
    }
    contents.record.to_json().expect("a record")
}

/// A sheet whose memo has some ten sheets; every number is invented.
fn sheet() -> Sheet {
    let mut sheet = Sheet::new("Principal stresses at 2000 m");
    let given = || Source::assumed("invented for this measurement");
    let sv = sheet.given("S_v", "vertical stress", 46.mpa(), given());
    let sh_max = sheet.given("S_Hmax", "larger horizontal stress", 41.mpa(), given());
    let sh_min = sheet.given("S_hmin", "smaller horizontal stress", 33.mpa(), given());
    let sh_max_azimuth = sheet.given("A_H", "its azimuth", Azimuth::from_true_north(35.deg()), given());
    let stress = Stress::from_horizontals(Horizontals { sv, sh_max, sh_min, sh_max_azimuth }).expect("a stress");
    sheet.add(&stress.principals());
    sheet.conclude("A conclusion.");
    sheet
}
