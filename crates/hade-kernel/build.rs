//! Packs the source of the `hade` library and its part of the workspace's lock file into this crate, so that
//! an installed `hade` can compile the library with the user's own compiler.
//!
//! Two manifests are made from `crates/hade/Cargo.toml`: the *stand-alone* one (workspace
//! inheritance resolved to literal versions, no dev-dependencies), from which the third-party
//! crates are built once, and the *session* one (no dependencies, a dylib), which a notebook
//! session sees.

use std::error::Error;
use std::fmt::Write as _;
use std::path::{Path, PathBuf};
use std::{env, fs};

use toml::{Table, Value};

fn main() -> Result<(), Box<dyn Error>> {
    let here = PathBuf::from(env::var("CARGO_MANIFEST_DIR")?);
    let root = here.join("../..").canonicalize()?;
    let library = root.join("crates/hade");
    let out = PathBuf::from(env::var("OUT_DIR")?);

    let workspace: Table = fs::read_to_string(root.join("Cargo.toml"))?.parse()?;
    let manifest: Table = fs::read_to_string(library.join("Cargo.toml"))?.parse()?;
    let standalone = standalone_manifest(&manifest, &workspace)?;
    fs::write(out.join("standalone.toml"), toml::to_string(&standalone)?)?;
    fs::write(out.join("session.toml"), toml::to_string(&session_manifest(&standalone))?)?;

    let mut generated = String::from("pub(crate) static LIBRARY: &[(&str, &[u8])] = &[\n");
    for file in files_below(&library)? {
        let name = file.strip_prefix(&library)?.to_string_lossy().replace('\\', "/");
        writeln!(generated, "    ({name:?}, include_bytes!({file:?})),")?;
    }
    generated.push_str("];\n");
    let lock = root.join("Cargo.lock");
    let locked: Table = fs::read_to_string(&lock)?.parse()?;
    fs::write(out.join("Cargo.lock"), toml::to_string(&pruned_lock(&locked, &standalone)?)?)?;
    writeln!(generated, "pub(crate) static MINISTD: &[(&str, &[u8])] = &[")?;
    let ministd = here.join("ministd");
    for file in files_below(&ministd)? {
        let name = file.strip_prefix(&ministd)?.to_string_lossy().replace('\\', "/");
        writeln!(generated, "    ({name:?}, include_bytes!({file:?})),")?;
    }
    generated.push_str("];\n");
    fs::write(out.join("packed.rs"), generated)?;

    for watched in [&library, &lock, &root.join("Cargo.toml"), &ministd, &here.join("build.rs")] {
        println!("cargo::rerun-if-changed={}", watched.display());
    }
    Ok(())
}

/// Every file the library is made of: all below it but its manifest, tests, benches and dotfiles.
fn files_below(folder: &Path) -> Result<Vec<PathBuf>, Box<dyn Error>> {
    let mut found = Vec::new();
    let mut todo = vec![folder.to_path_buf()];
    while let Some(dir) = todo.pop() {
        for entry in fs::read_dir(&dir)? {
            let path = entry?.path();
            let name = path.file_name().unwrap_or_default().to_string_lossy().into_owned();
            let top = dir == folder;
            if name.starts_with('.')
                || (top && matches!(&*name, "Cargo.toml" | "Cargo.lock" | "target" | "tests" | "benches" | "examples"))
            {
                continue;
            }
            if path.is_dir() {
                todo.push(path);
            } else {
                found.push(path);
            }
        }
    }
    found.sort();
    Ok(found)
}

/// `crates/hade/Cargo.toml` as it would be outside the workspace.
fn standalone_manifest(manifest: &Table, workspace: &Table) -> Result<Table, Box<dyn Error>> {
    let table = |value: Option<&Value>| value.and_then(Value::as_table).cloned();
    let inherited = table(workspace.get("workspace")).ok_or("no [workspace] in the root manifest")?;
    let package_defaults = table(inherited.get("package")).unwrap_or_default();
    let versions = table(inherited.get("dependencies")).unwrap_or_default();

    let mut package = table(manifest.get("package")).ok_or("no [package] in crates/hade")?;
    for (key, value) in package.iter_mut() {
        if value.get("workspace").is_some() {
            *value = package_defaults.get(key).ok_or_else(|| format!("workspace.package has no {key}"))?.clone();
        }
    }
    package.remove("build");

    let mut dependencies = Table::new();
    for (name, local) in table(manifest.get("dependencies")).unwrap_or_default() {
        let resolved = if local.get("workspace").is_some() {
            let base = versions.get(&name).ok_or_else(|| format!("workspace.dependencies has no {name}"))?;
            merged(base, &local)
        } else {
            local
        };
        if resolved.get("path").is_some() {
            return Err(format!("hade may not depend on the workspace crate {name}: it is packed").into());
        }
        dependencies.insert(name, resolved);
    }

    let mut out = Table::new();
    out.insert("package".into(), Value::Table(package));
    out.insert("dependencies".into(), Value::Table(dependencies));
    if let Some(features) = manifest.get("features") {
        out.insert("features".into(), features.clone());
    }
    out.insert("workspace".into(), Value::Table(Table::new()));
    Ok(out)
}

/// A workspace dependency with the member's own keys laid over it (features are added).
fn merged(base: &Value, local: &Value) -> Value {
    let mut result = match base {
        Value::Table(table) => table.clone(),
        version => Table::from_iter([("version".to_owned(), version.clone())]),
    };
    for (key, value) in local.as_table().into_iter().flatten() {
        match (key.as_str(), result.get_mut(key), value) {
            ("workspace", _, _) => {}
            ("features", Some(Value::Array(have)), Value::Array(more)) => {
                have.extend(more.iter().cloned());
            }
            _ => {
                result.insert(key.clone(), value.clone());
            }
        }
    }
    Value::Table(result)
}

/// The part of the workspace's lock file that `hade` needs. Other crates' versions then do not
/// make a session's libraries stale.
fn pruned_lock(lock: &Table, standalone: &Table) -> Result<Table, Box<dyn Error>> {
    let packages = lock.get("package").and_then(Value::as_array).ok_or("no packages in Cargo.lock")?;
    let text = |package: &Value, key: &str| package.get(key).and_then(Value::as_str).unwrap_or_default().to_owned();
    let needs = |package: &Value| -> Vec<String> {
        let list = package.get("dependencies").and_then(Value::as_array);
        list.into_iter().flatten().filter_map(Value::as_str).map(str::to_owned).collect()
    };
    // `name`, `name version` or `name version (source)`.
    let find = |spec: &str| {
        let mut parts = spec.split(' ');
        let (name, version) = (parts.next().unwrap_or_default(), parts.next());
        packages
            .iter()
            .position(|package| text(package, "name") == name && version.is_none_or(|v| text(package, "version") == v))
    };
    let mut root = find("hade").map(|at| packages[at].clone()).ok_or("hade is not in Cargo.lock")?;
    // The lock file does not tell dev-dependencies apart; the manifest does.
    let direct: Vec<String> = standalone
        .get("dependencies")
        .and_then(Value::as_table)
        .into_iter()
        .flatten()
        .map(|(key, value)| value.get("package").and_then(Value::as_str).unwrap_or(key).to_owned())
        .collect();
    let kept: Vec<String> = needs(&root)
        .into_iter()
        .filter(|spec| direct.iter().any(|name| spec.split(' ').next() == Some(name)))
        .collect();
    let mut wanted = std::collections::BTreeSet::new();
    let mut todo = kept.clone();
    while let Some(spec) = todo.pop() {
        let at = find(&spec).ok_or_else(|| format!("{spec} is not in Cargo.lock"))?;
        if wanted.insert(at) {
            todo.extend(needs(&packages[at]));
        }
    }
    if let Some(root) = root.as_table_mut() {
        root.insert("dependencies".into(), Value::Array(kept.into_iter().map(Value::String).collect()));
    }
    let mut list = vec![root];
    list.extend(wanted.into_iter().map(|at| packages[at].clone()));
    let mut out = Table::new();
    out.insert("version".into(), lock.get("version").cloned().ok_or("Cargo.lock has no version")?);
    out.insert("package".into(), Value::Array(list));
    Ok(out)
}

/// The manifest a session sees: nothing to resolve, nothing for the analyser to parse.
fn session_manifest(standalone: &Table) -> Table {
    let mut out = standalone.clone();
    out.insert("dependencies".into(), Value::Table(Table::new()));
    let kind = Value::Array(vec![Value::String("dylib".into())]);
    out.insert("lib".into(), Value::Table(Table::from_iter([("crate-type".to_owned(), kind)])));
    out
}
