//! The one list of routes. Paths are written in full at each handler; the operation id is the handler's name.

use axum::Router;
use utoipa::openapi::OpenApi;
use utoipa_axum::router::OpenApiRouter;
use utoipa_axum::routes;

use super::app::App;
use super::error::{Problem, ProblemCode};
use super::v1::{evaporants, example_devices, fluids, inspections, predictions, weather_sources};
use super::{health, middleware, openapi, pages};
use crate::config::Config;

fn routes() -> OpenApiRouter<App> {
    OpenApiRouter::with_openapi(openapi::head())
        .routes(routes!(predictions::create_prediction))
        .routes(routes!(inspections::create_weather_inspection))
        .routes(routes!(fluids::list_fluids))
        .routes(routes!(evaporants::list_evaporants))
        .routes(routes!(example_devices::list_example_devices))
        .routes(routes!(weather_sources::list_weather_sources))
        .routes(routes!(pages::get_start_page))
        .routes(routes!(pages::get_openapi_document))
        .routes(routes!(pages::get_openapi_3_0_document))
        .routes(routes!(pages::list_problems))
        .routes(routes!(pages::get_problem))
        .routes(routes!(health::get_liveness))
        .routes(routes!(health::get_readiness))
        .routes(routes!(health::get_metrics))
}

/// The API description, complete.
pub fn document() -> OpenApi {
    openapi::complete(routes().into_openapi())
}

/// The whole service as one router, and what its handlers share.
pub fn build(config: Config) -> (Router, App) {
    let app = App::new(config, &document());
    let (routes, _) = routes().split_for_parts();
    let all = routes
        .with_state(app.clone())
        .merge(pages::docs())
        .fallback(no_such_path);
    (middleware::wrap(all, &app), app)
}

async fn no_such_path() -> Problem {
    Problem::new(ProblemCode::NotFound, "no resource has this path; see /docs")
}
