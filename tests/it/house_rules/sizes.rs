//! How large a file and a function may grow. Blank lines, comments, docs and tests do not count.

use std::collections::BTreeSet;

use proc_macro2::{Span, TokenStream, TokenTree};
use syn::spanned::Spanned;
use syn::visit::{self, Visit};

use super::source::{self, Source, assert_none};

/// Above this a file is named in the output of the test, as a candidate for a split.
const FILE_LINES_WANTED: usize = 200;
const FILE_LINES_CEILING: usize = 400;
const FUNCTION_LINES_CEILING: usize = 50;

#[test]
fn files_stay_small() {
    let mut files = source::sources();
    files.extend(source::parsed("tests"));
    let mut complaints = Vec::new();
    for file in &files {
        let lines = code_lines(file);
        if lines > FILE_LINES_WANTED {
            println!(
                "{}: {lines} lines of code, more than the {FILE_LINES_WANTED} wanted",
                file.path
            );
        }
        if lines > FILE_LINES_CEILING {
            complaints.push(format!(
                "{}: {lines} lines of code, ceiling {FILE_LINES_CEILING}",
                file.path
            ));
        }
    }
    assert_none("files above the ceiling:", &complaints);
}

#[test]
fn functions_stay_small() {
    let complaints: Vec<String> = source::sources().iter().flat_map(long_functions).collect();
    assert_none("functions above the ceiling:", &complaints);
}

#[test]
fn the_rule_bites() {
    let body = "    let _ = 1;\n".repeat(FILE_LINES_CEILING);
    let long = Source::parse("src/model/air/bad.rs", &format!("fn f() {{\n{body}}}\n"));
    assert!(code_lines(&long) > FILE_LINES_CEILING);
    assert_eq!(long_functions(&long).len(), 1);
    let fine =
        format!("//! Words.\n\n/// More.\nfn f() {{}}\n// x\n#[cfg(test)]\nmod tests {{\nfn g() {{\n{body}}}\n}}\n");
    let fine = Source::parse("src/model/air/good.rs", &fine);
    assert_eq!(code_lines(&fine), 1);
    assert_none("tests do not count", &long_functions(&fine));
}

/// Lines that hold a token outside tests and docs.
fn code_lines(file: &Source) -> usize {
    let mut tests = TestSpans { lines: BTreeSet::new() };
    tests.visit_file(&file.syntax);
    let stream: TokenStream = file.text.parse().expect("the file parsed before");
    lines_of(stream).difference(&tests.lines).count()
}

fn lines_of(stream: TokenStream) -> BTreeSet<usize> {
    let mut lines = BTreeSet::new();
    let mut tokens = stream.into_iter().peekable();
    while let Some(token) = tokens.next() {
        let is_doc = matches!(&token, TokenTree::Punct(mark) if mark.as_char() == '#') && skip_doc(&mut tokens);
        if is_doc {
            continue;
        }
        if let TokenTree::Group(group) = &token {
            lines.extend([group.span_open().start().line, group.span_close().end().line]);
            lines.extend(lines_of(group.stream()));
        } else {
            lines.extend(span_lines(token.span()));
        }
    }
    lines
}

/// Steps over `[doc = "..."]`, with the `!` of an inner one, after its `#`.
fn skip_doc(tokens: &mut std::iter::Peekable<proc_macro2::token_stream::IntoIter>) -> bool {
    if matches!(tokens.peek(), Some(TokenTree::Punct(mark)) if mark.as_char() == '!') {
        tokens.next();
    }
    let is_doc =
        matches!(tokens.peek(), Some(TokenTree::Group(group)) if group.stream().to_string().starts_with("doc"));
    if is_doc {
        tokens.next();
    }
    is_doc
}

fn span_lines(span: Span) -> std::ops::RangeInclusive<usize> {
    span.start().line..=span.end().line
}

/// The lines of everything marked `#[cfg(test)]` or `#[test]` inside `src`.
struct TestSpans {
    lines: BTreeSet<usize>,
}

impl<'ast> Visit<'ast> for TestSpans {
    fn visit_item_mod(&mut self, module: &'ast syn::ItemMod) {
        if source::is_test_only(&module.attrs) {
            self.lines.extend(span_lines(module.span()));
        } else {
            visit::visit_item_mod(self, module);
        }
    }
}

fn long_functions(file: &Source) -> Vec<String> {
    let mut functions = Functions { long: Vec::new() };
    functions.visit_file(&file.syntax);
    functions
        .long
        .iter()
        .map(|(name, lines)| format!("{}: {name} has {lines} lines of code", file.path))
        .collect()
}

struct Functions {
    long: Vec<(String, usize)>,
}

impl Functions {
    fn weigh(&mut self, name: &syn::Ident, block: &syn::Block) {
        use quote::ToTokens;
        let lines = lines_of(block.to_token_stream()).len();
        if lines > FUNCTION_LINES_CEILING {
            self.long.push((name.to_string(), lines));
        }
    }
}

impl<'ast> Visit<'ast> for Functions {
    fn visit_item_mod(&mut self, module: &'ast syn::ItemMod) {
        if !source::is_test_only(&module.attrs) {
            visit::visit_item_mod(self, module);
        }
    }

    fn visit_item_fn(&mut self, function: &'ast syn::ItemFn) {
        self.weigh(&function.sig.ident, &function.block);
        visit::visit_item_fn(self, function);
    }

    fn visit_impl_item_fn(&mut self, function: &'ast syn::ImplItemFn) {
        self.weigh(&function.sig.ident, &function.block);
        visit::visit_impl_item_fn(self, function);
    }
}
