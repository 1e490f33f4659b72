//! The real program, run in fresh folders.

use std::ffi::OsStr;
use std::fs;
use std::path::Path;
use std::path::PathBuf;
use std::process::Command;
use std::process::Stdio;

use serde_json::Value;

/// What a run left behind.
pub struct Ran {
    pub code: i32,
    pub out: String,
    pub err: String,
}

impl Ran {
    /// Standard output, after a check that the run ended well.
    pub fn answer(self) -> String {
        assert_eq!(self.code, 0, "{}", self.err);
        self.out
    }

    /// The answer read as JSON.
    pub fn json(self) -> Value {
        serde_json::from_str(&self.answer()).expect("the answer is JSON")
    }
}

/// The program with its arguments, in a folder; change its surroundings, then [`ran`].
pub fn program(folder: &Path, arguments: impl IntoIterator<Item = impl AsRef<OsStr>>) -> Command {
    let mut command = Command::new(env!("CARGO_BIN_EXE_edgesheet"));
    command.current_dir(folder).args(arguments).stdin(Stdio::null());
    command
}

/// Runs to the end.
pub fn ran(command: &mut Command) -> Ran {
    let output = command.output().expect("the program starts");
    let text = |bytes: Vec<u8>| String::from_utf8(bytes).expect("answers and findings are UTF-8");
    Ran { code: output.status.code().expect("an exit code"), out: text(output.stdout), err: text(output.stderr) }
}

/// Runs a line such as `sheet device.toml -o out` in a folder. Words are split at spaces.
pub fn run(folder: &Path, line: &str) -> Ran {
    ran(&mut program(folder, line.split_whitespace()))
}

/// The folder of the repository.
pub fn repository() -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR"))
}

/// An empty folder of this name for one test.
pub fn fresh(name: &str) -> PathBuf {
    let folder = Path::new(env!("CARGO_TARGET_TMPDIR")).join(name);
    if folder.exists() {
        fs::remove_dir_all(&folder).expect("the old folder goes");
    }
    fs::create_dir_all(&folder).expect("a folder");
    folder
}

/// A fresh folder that holds the files of a demo device.
pub fn with_demo(name: &str, demo: &str) -> PathBuf {
    let folder = fresh(name);
    copy_demo(demo, &folder);
    folder
}

/// Copies the files of a demo device into a folder.
pub fn copy_demo(demo: &str, folder: &Path) {
    for (name, path) in files(&repository().join("demo-devices").join(demo)) {
        fs::copy(path, folder.join(name)).expect("a copy");
    }
}

/// The folders of all demo devices.
pub fn demos() -> Vec<PathBuf> {
    let entries = fs::read_dir(repository().join("demo-devices")).expect("demo devices");
    let mut found: Vec<PathBuf> = entries.map(|entry| entry.expect("an entry").path()).collect();
    found.retain(|folder| folder.join("device.toml").exists());
    found.sort();
    assert!(found.len() >= 3, "{found:?}");
    found
}

/// Names and paths of the files in a folder, by name.
pub fn files(folder: &Path) -> Vec<(String, PathBuf)> {
    let entries = fs::read_dir(folder).expect("a folder");
    let mut found: Vec<PathBuf> = entries.map(|entry| entry.expect("an entry").path()).collect();
    found.sort();
    found.into_iter().map(|path| (path.file_name().unwrap().to_string_lossy().into_owned(), path)).collect()
}

/// Names of what is in a folder, also hidden.
pub fn names(folder: &Path) -> Vec<String> {
    files(folder).into_iter().map(|(name, _)| name).collect()
}

/// A bar with six contacts `1` to `6` and a gate `TG` between the probes, filling `bulk` with `gated` under the gate, plus
/// further lines for the end of the file.
pub fn bar(bulk: &str, gated: &str, more: &str) -> String {
    let ends = [("1", "edge = \"left\""), ("4", "edge = \"right\"")];
    let sides = [("2", "top", 150), ("3", "top", 450), ("5", "bottom", 450), ("6", "bottom", 150)];
    let mut contacts: Vec<(&str, String)> = ends.map(|(name, place)| (name, place.to_owned())).to_vec();
    contacts.extend(sides.map(|(name, edge, x)| (name, format!("edge = \"{edge}\"\nx_um = {x}\nwidth_um = 20"))));
    contacts.sort();
    let contacts: String =
        contacts.iter().map(|(name, place)| format!("[[contact]]\nname = \"{name}\"\n{place}\n")).collect();
    format!(
        "format = 1\n[device]\nid = \"bar\"\n[mesa]\nshape = \"bar\"\nlength_um = 600\nwidth_um = 100\n{contacts}\
         [[gate]]\nname = \"TG\"\nfrom_um = 250\nto_um = 350\n\
         [[point]]\nname = \"point\"\nbulk = {bulk}\nfillings = {{ TG = {gated} }}\n{more}"
    )
}
