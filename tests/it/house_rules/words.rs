//! What may not be written: shortcuts in code, and names of machines or package hosts anywhere.

use proc_macro2::TokenTree;
use syn::visit::{self, Visit};

use super::source::{self, Source, assert_none};

#[test]
fn no_shortcuts_in_code() {
    let mut files = source::sources();
    files.extend(source::parsed("tests"));
    let complaints: Vec<String> = files.iter().flat_map(shortcuts).collect();
    assert_none("shortcuts in code:", &complaints);
}

#[test]
fn the_rule_bites() {
    let wrong = [
        "fn f() { Some(1).unwrap(); }",
        "fn f() { todo!() }",
        "fn f() { unimplemented!() }",
        "fn f() { dbg!(1); }",
        "#[cfg(test)] mod tests { #[test] #[ignore = \"slow\"] fn f() {} }",
        "fn f() { unsafe { g() } }",
    ];
    for text in wrong {
        assert_eq!(
            shortcuts(&Source::parse("src/model/air/bad.rs", text)).len(),
            1,
            "{text}"
        );
    }
    let right = [
        "// todo!() unwrap()\nfn f() { let _ = \"todo!()\"; Some(1).unwrap_or(2); }",
        "#[cfg(test)] mod tests { #[test] fn f() { Some(1).unwrap(); } }",
    ];
    for text in right {
        assert_none(text, &shortcuts(&Source::parse("src/model/air/good.rs", text)));
    }
    let hosts = foreign_words("x.sh", &format!("cd /ro{}/x && curl https://py{}.org", "ot", "pi"));
    assert_eq!(hosts.len(), 2, "{hosts:?}");
}

#[test]
fn no_machine_paths_and_no_package_hosts() {
    let endings = [
        ".rs", ".md", ".toml", ".sh", ".py", ".js", ".mjs", ".ts", ".json", ".yml", ".yaml", ".csv", ".service", "run",
    ];
    let mut files = source::files_under(".", &endings);
    files.extend(
        ["Dockerfile", ".dockerignore"]
            .map(String::from)
            .into_iter()
            .filter(|name| source::repository().join(name).exists()),
    );
    let complaints: Vec<String> = files
        .iter()
        .filter(|path| !path.starts_with("./Cargo.lock"))
        .flat_map(|path| {
            foreign_words(
                path,
                &String::from_utf8_lossy(&std::fs::read(source::repository().join(path)).unwrap()),
            )
        })
        .collect();
    assert_none("paths of one machine, or hosts of package registries:", &complaints);
}

/// Words that tell of one machine or one network; spelled in two pieces, so that this file does not hold them itself.
fn foreign_words(path: &str, text: &str) -> Vec<String> {
    let forbidden = [
        ("/wo", "rk/"),
        ("/ro", "ot/"),
        ("/tm", "p/"),
        ("/ho", "me/"),
        ("crates", ".io"),
        ("py", "pi.org"),
        ("python", "hosted"),
        ("npm", "js.org"),
        ("deb.de", "bian.org"),
        ("shared/", "design"),
        ("mod", "el.md"),
    ];
    forbidden
        .iter()
        .map(|(first, second)| format!("{first}{second}"))
        .filter(|word| text.contains(word.as_str()))
        .map(|word| format!("{path}: {word}"))
        .collect()
}

fn shortcuts(file: &Source) -> Vec<String> {
    let mut finder = Finder {
        in_tests: !file.path.starts_with("src/"),
        found: Vec::new(),
    };
    finder.visit_file(&file.syntax);
    finder
        .found
        .iter()
        .map(|what| format!("{}: {what}", file.path))
        .collect()
}

struct Finder {
    in_tests: bool,
    found: Vec<String>,
}

impl Finder {
    fn add(&mut self, what: &str, line: usize) {
        self.found.push(format!("{what} in line {line}"));
    }
}

impl<'ast> Visit<'ast> for Finder {
    fn visit_item_mod(&mut self, module: &'ast syn::ItemMod) {
        let before = self.in_tests;
        self.in_tests |= source::is_test_only(&module.attrs);
        visit::visit_item_mod(self, module);
        self.in_tests = before;
    }

    fn visit_attribute(&mut self, attribute: &'ast syn::Attribute) {
        if attribute.path().is_ident("ignore") {
            self.add("#[ignore]", attribute.pound_token.span.start().line);
        }
    }

    fn visit_expr_unsafe(&mut self, block: &'ast syn::ExprUnsafe) {
        self.add("unsafe", block.unsafe_token.span.start().line);
        visit::visit_expr_unsafe(self, block);
    }

    fn visit_expr_method_call(&mut self, call: &'ast syn::ExprMethodCall) {
        if call.method == "unwrap" && !self.in_tests {
            self.add("unwrap()", call.method.span().start().line);
        }
        visit::visit_expr_method_call(self, call);
    }

    fn visit_macro(&mut self, call: &'ast syn::Macro) {
        let name = call
            .path
            .segments
            .last()
            .map(|segment| segment.ident.to_string())
            .unwrap_or_default();
        let line = call.bang_token.span.start().line;
        if ["todo", "unimplemented", "dbg"].contains(&name.as_str()) {
            self.add(&format!("{name}!"), line);
        }
        if !self.in_tests {
            let mut inside = Vec::new();
            source::each_token(call.tokens.clone(), &mut |token| {
                inside.push(matches!(token, TokenTree::Ident(word) if word == "unwrap"));
            });
            if inside.contains(&true) {
                self.add("unwrap()", line);
            }
        }
        visit::visit_macro(self, call);
    }
}
