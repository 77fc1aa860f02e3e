//! A public formula says its unit: every documented function of the formula rooms that hands back a bare number names the
//! unit in square brackets, is one of the named dimensionless numbers, or says `dimensionless`.

use syn::visit::{self, Visit};

use super::source::{self, Source, assert_none};

const FORMULA_ROOMS: [&str; 3] = ["src/model/air/", "src/model/transfer/", "src/model/fluids/"];

#[test]
fn formulas_name_their_units() {
    let files: Vec<Source> = source::sources();
    let ours = files
        .iter()
        .filter(|file| FORMULA_ROOMS.iter().any(|room| file.path.starts_with(room)));
    assert_none(
        "public formulas without a unit in their docs:",
        &ours.flat_map(without_unit).collect::<Vec<_>>(),
    );
}

#[test]
fn the_rule_bites() {
    let wrong = [
        "/// Slope of the curve.\npub fn slope(temp_k: f64) -> f64 { temp_k }",
        "pub fn slope(temp_k: f64) -> f64 { temp_k }",
    ];
    for text in wrong {
        assert_eq!(
            without_unit(&Source::parse("src/model/air/bad.rs", text)).len(),
            1,
            "{text}"
        );
    }
    let right = [
        "/// Slope [Pa/K] at a temperature [K].\npub fn slope(temp_k: f64) -> f64 { temp_k }",
        "/// Nusselt number of a plate.\npub fn nusselt(re: f64) -> f64 { re }",
        "fn private(x: f64) -> f64 { x }",
        "/// Rows.\npub fn rows() -> usize { 1 }",
    ];
    for text in right {
        assert_none(text, &without_unit(&Source::parse("src/model/air/good.rs", text)));
    }
}

fn without_unit(file: &Source) -> Vec<String> {
    let mut formulas = Formulas { without: Vec::new() };
    formulas.visit_file(&file.syntax);
    formulas
        .without
        .iter()
        .map(|name| format!("{}: {name}", file.path))
        .collect()
}

struct Formulas {
    without: Vec<String>,
}

impl Formulas {
    fn judge(&mut self, visibility: &syn::Visibility, signature: &syn::Signature, attributes: &[syn::Attribute]) {
        let public = matches!(visibility, syn::Visibility::Public(_));
        if public && returns_bare_number(&signature.output) && !names_unit(&docs(attributes)) {
            self.without.push(signature.ident.to_string());
        }
    }
}

impl<'ast> Visit<'ast> for Formulas {
    fn visit_item_fn(&mut self, function: &'ast syn::ItemFn) {
        self.judge(&function.vis, &function.sig, &function.attrs);
        visit::visit_item_fn(self, function);
    }

    fn visit_impl_item_fn(&mut self, function: &'ast syn::ImplItemFn) {
        self.judge(&function.vis, &function.sig, &function.attrs);
        visit::visit_impl_item_fn(self, function);
    }
}

fn returns_bare_number(output: &syn::ReturnType) -> bool {
    match output {
        syn::ReturnType::Type(_, of) => matches!(&**of, syn::Type::Path(path) if path.path.is_ident("f64")),
        syn::ReturnType::Default => false,
    }
}

fn docs(attributes: &[syn::Attribute]) -> String {
    let text = |attribute: &syn::Attribute| match &attribute.meta {
        syn::Meta::NameValue(pair) if pair.path.is_ident("doc") => match &pair.value {
            syn::Expr::Lit(syn::ExprLit {
                lit: syn::Lit::Str(text),
                ..
            }) => Some(text.value()),
            _ => None,
        },
        _ => None,
    };
    attributes.iter().filter_map(text).collect::<Vec<_>>().join("\n")
}

/// A named dimensionless number, or a bracket that is neither a link to an item nor a key of the bibliography.
fn names_unit(docs: &str) -> bool {
    const WITHOUT_UNIT: [&str; 3] = ["Nusselt number", "Sherwood number", "dimensionless"];
    WITHOUT_UNIT.iter().any(|words| docs.contains(words))
        || docs
            .split('[')
            .skip(1)
            .filter_map(|after| after.split_once(']'))
            .any(|(inside, _)| {
                let year = inside.len() > 4 && inside.chars().rev().take(4).all(|letter| letter.is_ascii_digit());
                !inside.starts_with('`') && !year
            })
}
