//! Serving the folder with the built page to this machine alone.

use std::net::Ipv4Addr;
use std::path::Path;

use axum::Router;
use axum::response::Redirect;
use axum::routing::get;
use tokio::net::TcpListener;
use tower_http::services::ServeDir;

use crate::command::Failure;

/// The port that is tried first.
pub const USUAL_PORT: u16 = 8630;

/// Serves `folder` until the user interrupts.
///
/// # Errors
/// When no port of this machine can be had.
pub async fn serve(folder: &Path, port: u16, page: &str) -> Result<(), Failure> {
    let failed = |error: std::io::Error| {
        Failure::new(
            format!("could not serve on this machine's own address 127.0.0.1: {error}"),
            "open the page by its path instead",
        )
    };
    let listener = listen(port).await.map_err(failed)?;
    let address = listener.local_addr().map_err(failed)?;
    println!("serving http://{address}/{page} (end with Ctrl+C)");
    axum::serve(listener, routes(folder, page))
        .with_graceful_shutdown(async {
            let _ = tokio::signal::ctrl_c().await;
        })
        .await
        .map_err(failed)
}

/// The port that was asked for or, if it is taken, any free one.
async fn listen(port: u16) -> std::io::Result<TcpListener> {
    match TcpListener::bind((Ipv4Addr::LOCALHOST, port)).await {
        Ok(listener) => Ok(listener),
        Err(_) => TcpListener::bind((Ipv4Addr::LOCALHOST, 0)).await,
    }
}

fn routes(folder: &Path, page: &str) -> Router {
    let page = format!("/{page}");
    Router::new()
        .route("/", get(move || async move { Redirect::temporary(&page) }))
        .fallback_service(ServeDir::new(folder))
}

#[cfg(test)]
#[allow(clippy::unwrap_used)]
mod tests {
    use tokio::io::{AsyncReadExt, AsyncWriteExt};
    use tokio::net::TcpStream;

    use super::*;

    #[test]
    fn a_taken_port_is_replaced_and_types_are_right() {
        let folder = std::env::temp_dir().join(format!("pack-serve-{}", std::process::id()));
        std::fs::create_dir_all(&folder).unwrap();
        std::fs::write(folder.join("page.html"), "<p>hello</p>").unwrap();
        std::fs::write(folder.join("a.kelvinclock.json"), "{}").unwrap();
        let runtime = tokio::runtime::Builder::new_current_thread().enable_all().build().unwrap();
        runtime.block_on(async {
            let taken = listen(0).await.unwrap();
            let listener = listen(taken.local_addr().unwrap().port()).await.unwrap();
            let address = listener.local_addr().unwrap();
            assert_ne!(address, taken.local_addr().unwrap());
            assert!(address.ip().is_loopback());
            let routes = routes(&folder, "page.html");
            let server = tokio::spawn(async { axum::serve(listener, routes).await });
            let fetch = async |path: &str| {
                let mut stream = TcpStream::connect(address).await.unwrap();
                let request =
                    format!("GET {path} HTTP/1.1\r\nhost: x\r\nconnection: close\r\n\r\n");
                stream.write_all(request.as_bytes()).await.unwrap();
                let mut answer = String::new();
                stream.read_to_string(&mut answer).await.unwrap();
                answer.to_lowercase()
            };
            assert!(fetch("/").await.contains("location: /page.html"));
            let page = fetch("/page.html").await;
            assert!(page.contains("content-type: text/html") && page.ends_with("<p>hello</p>"));
            let study = fetch("/a.kelvinclock.json").await;
            assert!(study.contains("content-type: application/json"), "{study}");
            assert!(fetch("/none.html").await.starts_with("http/1.1 404"));
            server.abort();
        });
        std::fs::remove_dir_all(folder).unwrap();
    }
}
