//! Pages for people: the interactive description, and what each problem type means.

use axum::extract::{Path, State};
use axum::http::header;
use axum::response::{Html, IntoResponse, Redirect, Response};
use utoipa::openapi::RefOr;
use utoipa::openapi::schema::{ObjectBuilder, Schema, Type};
use utoipa::{PartialSchema, ToSchema};
use utoipa_swagger_ui::{Config, SwaggerUi};

use super::app::App;
use super::error::{Problem, ProblemCode};
use super::problems::{KINDS, ProblemKind};

/// The interactive description under `/docs`; all its files are inside the binary.
pub fn docs() -> axum::Router {
    let config = Config::new(["/openapi.json"])
        .validator_url("none")
        .try_it_out_enabled(true);
    SwaggerUi::new("/docs").config(config).into()
}

/// The start page: leads to /docs
#[utoipa::path(get, path = "/", tag = "service", security(()),
    responses((status = 307, description = "To /docs/.", headers(("location" = String, description = "/docs/")))))]
pub async fn get_start_page() -> Redirect {
    Redirect::temporary("/docs/")
}

/// This description
///
/// OpenAPI 3.1.
#[utoipa::path(get, path = "/openapi.json", tag = "service", security(()),
    responses((status = 200, description = "The OpenAPI 3.1 document.", body = Object, content_type = "application/json")))]
pub async fn get_openapi_document(State(app): State<App>) -> Response {
    ([(header::CONTENT_TYPE, "application/json")], app.document()).into_response()
}

/// This description for generators that cannot read 3.1
///
/// OpenAPI 3.0.3, rewritten from the 3.1 document.
#[utoipa::path(get, path = "/openapi-3.0.json", tag = "service", security(()),
    responses((status = 200, description = "The OpenAPI 3.0.3 document.", body = Object, content_type = "application/json")))]
pub async fn get_openapi_3_0_document(State(app): State<App>) -> Response {
    ([(header::CONTENT_TYPE, "application/json")], app.document_3_0()).into_response()
}

/// All problem types on one page
#[utoipa::path(get, path = "/problems", tag = "service", security(()),
    responses((status = 200, description = "A page.", body = String, content_type = "text/html")))]
pub async fn list_problems() -> Html<String> {
    let rows: String = KINDS
        .iter()
        .map(|kind| {
            let (code, status, title) = (kind.code, kind.status.as_u16(), escaped(kind.title));
            format!("<li><a href=\"/problems/{code}\">{code}</a> ({status}): {title}</li>\n")
        })
        .collect();
    page("Problem types", &format!("<ul>\n{rows}</ul>\n"))
}

/// What a problem type means
///
/// The page behind the `type` of a problem document: cause, example, remedy.
#[utoipa::path(get, path = "/problems/{code}", tag = "service", security(()),
    params(("code" = inline(ProblemName), Path, description = "Last part of a problem's `type`.", example = "invalid_request")),
    responses((status = 200, description = "A page.", body = String, content_type = "text/html")))]
pub async fn get_problem(Path(code): Path<String>) -> Result<Html<String>, Problem> {
    let kind = KINDS.iter().find(|kind| kind.code == code);
    let missing = || {
        Problem::new(
            ProblemCode::NotFound,
            "there is no such problem type; /problems lists them all",
        )
    };
    kind.map(explanation).ok_or_else(missing)
}

/// The codes of the table, as a schema.
pub struct ProblemName;

impl PartialSchema for ProblemName {
    fn schema() -> RefOr<Schema> {
        let codes = KINDS.iter().map(|kind| kind.code);
        ObjectBuilder::new()
            .schema_type(Type::String)
            .enum_values(Some(codes))
            .into()
    }
}

impl ToSchema for ProblemName {}

fn explanation(kind: &ProblemKind) -> Html<String> {
    let section = |head: &str, text: &str| format!("<h2>{head}</h2>\n<p>{}</p>\n", escaped(text));
    let body = format!(
        "<p>Status {}, code <code>{}</code></p>\n{}<h2>Example</h2>\n<pre>{}</pre>\n{}<p><a href=\"/problems\">All problem types</a></p>\n",
        kind.status.as_u16(),
        kind.code,
        section("Cause", kind.cause),
        escaped(kind.example),
        section("Remedy", kind.remedy),
    );
    page(kind.title, &body)
}

fn page(title: &str, body: &str) -> Html<String> {
    let title = escaped(title);
    Html(format!(
        "<!doctype html>\n<html lang=\"en\"><head><meta charset=\"utf-8\"><title>{title} - dipcast</title>\
         <meta name=\"viewport\" content=\"width=device-width\">\
         <style>body{{font:1rem/1.5 system-ui,sans-serif;max-width:40rem;margin:2rem auto;padding:0 1rem}}\
         pre{{white-space:pre-wrap;background:#eee;color:#111;padding:.5rem}}</style></head>\n\
         <body><h1>{title}</h1>\n{body}</body></html>\n"
    ))
}

fn escaped(text: &str) -> String {
    text.replace('&', "&amp;")
        .replace('<', "&lt;")
        .replace('>', "&gt;")
        .replace('"', "&quot;")
}
