//! Reads the sources of this crate into syntax trees, with the module path each file stands for.

use std::path::{Path, PathBuf};

use proc_macro2::{TokenStream, TokenTree};

/// One source file, parsed.
pub struct Source {
    /// Path from the repository root, with forward slashes.
    pub path: String,
    /// Module path below the crate root: `src/model/air/wet_bulb.rs` is `["model", "air", "wet_bulb"]`.
    pub module: Vec<String>,
    pub text: String,
    pub syntax: syn::File,
}

impl Source {
    pub fn parse(path: &str, text: &str) -> Source {
        let syntax = syn::parse_file(text).unwrap_or_else(|error| panic!("{path} does not parse: {error}"));
        Source {
            path: path.into(),
            module: module_of(path),
            text: text.into(),
            syntax,
        }
    }

    /// The first segment of the module path; `lib` and `main` for the two roots.
    pub fn room(&self) -> &str {
        &self.module[0]
    }
}

fn module_of(path: &str) -> Vec<String> {
    let inner = path.trim_start_matches("src/").trim_end_matches(".rs");
    let mut module: Vec<String> = inner.split('/').map(String::from).collect();
    if module.len() > 1 && module.last().is_some_and(|last| last == "mod") {
        module.pop();
    }
    module
}

pub fn repository() -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR"))
}

/// Every file under `folder` (from the repository root) whose name ends in one of `endings`, sorted; build output left out.
pub fn files_under(folder: &str, endings: &[&str]) -> Vec<String> {
    let root = repository();
    let mut found = Vec::new();
    collect(&root.join(folder), &mut found);
    let mut relative: Vec<String> = found
        .iter()
        .map(|path| {
            path.strip_prefix(&root)
                .unwrap_or(path)
                .to_string_lossy()
                .replace('\\', "/")
        })
        .filter(|path| endings.iter().any(|ending| path.ends_with(ending)))
        .collect();
    relative.sort();
    relative
}

fn collect(path: &Path, found: &mut Vec<PathBuf>) {
    const NOT_OURS: [&str; 4] = [".git", ".venv", "node_modules", "target"];
    if path.is_file() {
        found.push(path.to_path_buf());
        return;
    }
    let Ok(entries) = std::fs::read_dir(path) else { return };
    for entry in entries.flatten() {
        if !NOT_OURS.iter().any(|name| entry.file_name() == *name) {
            collect(&entry.path(), found);
        }
    }
}

pub fn read(path: &str) -> String {
    std::fs::read_to_string(repository().join(path)).unwrap_or_else(|error| panic!("cannot read {path}: {error}"))
}

/// Every source file of the crate.
pub fn sources() -> Vec<Source> {
    parsed("src")
}

/// Every Rust file under a folder.
pub fn parsed(folder: &str) -> Vec<Source> {
    files_under(folder, &[".rs"])
        .iter()
        .map(|path| Source::parse(path, &read(path)))
        .collect()
}

pub fn is_test_only(attributes: &[syn::Attribute]) -> bool {
    attributes.iter().any(|attribute| match &attribute.meta {
        syn::Meta::List(list) if list.path.is_ident("cfg") => list.tokens.to_string() == "test",
        syn::Meta::Path(path) => path.is_ident("test"),
        _ => false,
    })
}

/// Calls `see` with every token, groups opened; comments are not tokens, doc comments are (as `#[doc]`).
pub fn each_token(stream: TokenStream, see: &mut dyn FnMut(&TokenTree)) {
    for token in stream {
        see(&token);
        if let TokenTree::Group(group) = &token {
            each_token(group.stream(), see);
        }
    }
}

/// Fails with every complaint on its own line.
pub fn assert_none(rule: &str, complaints: &[String]) {
    assert!(complaints.is_empty(), "{rule}\n  {}", complaints.join("\n  "));
}
