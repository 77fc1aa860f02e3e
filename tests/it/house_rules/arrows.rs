//! Who may use whom. Data flows down the rooms of `src/lib.rs`; inside the model, down the list of `src/model/mod.rs`.

use syn::visit::{self, Visit};

use super::source::{self, Source, assert_none};

/// What a room may name besides itself. `main` may name everything.
const ARROWS: [(&str, &[&str]); 7] = [
    ("http", &["service", "config", "telemetry"]),
    ("service", &["model", "intake", "store", "config", "telemetry"]),
    ("store", &["model", "config", "telemetry"]),
    ("intake", &["model", "config", "telemetry"]),
    ("model", &[]),
    ("config", &[]),
    ("telemetry", &["config"]),
];

#[test]
fn rooms_use_only_the_rooms_they_may() {
    let order = model_order(&source::read("src/model/mod.rs"));
    let complaints: Vec<String> = source::sources()
        .iter()
        .flat_map(|file| wrong_arrows(file, &order))
        .collect();
    assert_none(
        "arrows outside the rules (tests/it/house_rules/arrows.rs):",
        &complaints,
    );
}

#[test]
fn the_rule_bites() {
    let order = ["notes", "air", "transfer", "weather"].map(String::from);
    let wrong = [
        ("src/model/air/mod.rs", "use crate::http::router;"),
        (
            "src/model/air/mod.rs",
            "use crate::{model::{notes::Fault, weather::HourlySeries}};",
        ),
        ("src/model/air/saturation.rs", "use super::super::transfer::blend;"),
        (
            "src/model/air/mod.rs",
            "fn f() { let _ = super::transfer::blend(1.0, 2.0); }",
        ),
        ("src/model/air/mod.rs", "fn f() { assert!(crate::service::run()); }"),
        (
            "src/model/air/mod.rs",
            "#[cfg(test)] mod tests { use super::super::weather; }",
        ),
        ("src/intake/csv/mod.rs", "use crate::service::Error;"),
        ("src/service/mod.rs", "use crate::http::v1;"),
        ("src/http/v1/predictions.rs", "use crate::model::cycle::State;"),
        ("src/telemetry.rs", "use crate::http;"),
        ("src/unlisted/mod.rs", "use crate::model::air;"),
    ];
    for (path, text) in wrong {
        assert_eq!(
            wrong_arrows(&Source::parse(path, text), &order).len(),
            1,
            "{path}: {text}"
        );
    }
    let right = [
        ("src/main.rs", "use dipcast::http; use crate::anything;"),
        (
            "src/http/v1/mod.rs",
            "use crate::service::predict; use super::problem; mod tests { use super::super::router; }",
        ),
        ("src/service/mod.rs", "use crate::{intake::csv, model::prediction};"),
        (
            "src/model/transfer/sphere.rs",
            "use crate::model::air::Air; use super::blend; use super::super::notes::Fault;",
        ),
        (
            "src/model/air/mod.rs",
            "#[cfg(test)] mod tests { use super::*; use super::super::notes; }",
        ),
        (
            "src/model/air/mod.rs",
            "/// See [`crate::http`].\nfn f() { let _ = \"crate::http\"; } // crate::http",
        ),
    ];
    for (path, text) in right {
        assert_none(path, &wrong_arrows(&Source::parse(path, text), &order));
    }
}

#[test]
fn the_order_inside_the_model_is_read_from_its_list() {
    let order = model_order(&source::read("src/model/mod.rs"));
    assert_eq!(order.first().map(String::as_str), Some("notes"));
    assert_eq!(order.last().map(String::as_str), Some("prediction"));
}

/// The rooms of the model in the order of their `mod` lines.
fn model_order(text: &str) -> Vec<String> {
    let file = syn::parse_file(text).expect("src/model/mod.rs parses");
    file.items
        .iter()
        .filter_map(|item| match item {
            syn::Item::Mod(module) => Some(module.ident.to_string()),
            _ => None,
        })
        .collect()
}

fn wrong_arrows(file: &Source, order: &[String]) -> Vec<String> {
    if file.room() == "main" || file.room() == "lib" {
        return Vec::new();
    }
    let mut paths = Paths {
        module: file.module.clone(),
        found: Vec::new(),
    };
    paths.visit_file(&file.syntax);
    let mut complaints: Vec<String> = paths
        .found
        .iter()
        .filter_map(|used| {
            fault(&file.module, used, order).map(|why| format!("{}: {} ({why})", file.path, used.join("::")))
        })
        .collect();
    complaints.sort();
    complaints.dedup();
    complaints
}

/// Why `used` may not be named from `from`, both as paths below the crate root.
fn fault(from: &[String], used: &[String], order: &[String]) -> Option<String> {
    let (room, target) = (from[0].as_str(), used.first()?.as_str());
    if room != target {
        let Some((_, allowed)) = ARROWS.iter().find(|(name, _)| *name == room) else {
            return Some(format!("the room {room} is not in the list of arrows"));
        };
        return (!allowed.contains(&target)).then(|| format!("{room} may not use {target}"));
    }
    if room != "model" || from.len() < 2 || used.len() < 2 || from[1] == used[1] {
        return None;
    }
    let place = |name: &String| order.iter().position(|listed| listed == name);
    match (place(&from[1]), place(&used[1])) {
        (Some(own), Some(other)) if other < own => None,
        (Some(_), Some(_)) => Some(format!("{} stands above {} in src/model/mod.rs", from[1], used[1])),
        _ => Some(format!(
            "name the room: {} or {} is not listed in src/model/mod.rs",
            from[1], used[1]
        )),
    }
}

/// Gathers every path that starts at `crate` or `super`, resolved to the crate root.
struct Paths {
    module: Vec<String>,
    found: Vec<Vec<String>>,
}

impl Paths {
    fn add(&mut self, segments: Vec<String>) {
        let supers = segments.iter().take_while(|segment| *segment == "super").count();
        let absolute = match segments.first().map(String::as_str) {
            Some("crate") => segments[1..].to_vec(),
            Some("super") if supers <= self.module.len() => {
                [&self.module[..self.module.len() - supers], &segments[supers..]].concat()
            }
            _ => return,
        };
        if !absolute.is_empty() {
            self.found.push(absolute);
        }
    }

    fn add_tree(&mut self, tree: &syn::UseTree, before: &[String]) {
        let with = |name: &syn::Ident| [before, &[name.to_string()]].concat();
        match tree {
            syn::UseTree::Path(path) => self.add_tree(&path.tree, &with(&path.ident)),
            syn::UseTree::Group(group) => group.items.iter().for_each(|item| self.add_tree(item, before)),
            syn::UseTree::Name(name) if name.ident == "self" => self.add(before.to_vec()),
            syn::UseTree::Name(name) => self.add(with(&name.ident)),
            syn::UseTree::Rename(name) => self.add(with(&name.ident)),
            syn::UseTree::Glob(_) => self.add(before.to_vec()),
        }
    }
}

impl<'ast> Visit<'ast> for Paths {
    fn visit_item_mod(&mut self, module: &'ast syn::ItemMod) {
        self.module.push(module.ident.to_string());
        visit::visit_item_mod(self, module);
        self.module.pop();
    }

    fn visit_item_use(&mut self, item: &'ast syn::ItemUse) {
        self.add_tree(&item.tree, &[]);
    }

    fn visit_path(&mut self, path: &'ast syn::Path) {
        self.add(path.segments.iter().map(|segment| segment.ident.to_string()).collect());
        visit::visit_path(self, path);
    }

    /// Inside a macro there is no syntax tree; the words are read one after another.
    fn visit_macro(&mut self, call: &'ast syn::Macro) {
        let mut words = Vec::new();
        source::each_token(call.tokens.clone(), &mut |token| words.push(token.to_string()));
        for start in 0..words.len() {
            if words[start] == "crate" || (words[start] == "super" && (start < 3 || words[start - 3] != "super")) {
                self.add(path_at(&words[start..]));
            }
        }
        visit::visit_macro(self, call);
    }
}

/// `["crate", ":", ":", "model", ":", ":", "air", "("]` is `["crate", "model", "air"]`.
fn path_at(words: &[String]) -> Vec<String> {
    let mut path = vec![words[0].clone()];
    let mut rest = &words[1..];
    while let [first, second, name, tail @ ..] = rest {
        if first != ":" || second != ":" {
            break;
        }
        path.push(name.clone());
        rest = tail;
    }
    path
}
