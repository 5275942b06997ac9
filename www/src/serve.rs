//! Serves a site on this machine only.

use crate::budget::brotli;
use crate::policy;
use crate::site::{PAGE, SINGLE, Site};
use anyhow::{Context, Result};
use http_body_util::Full;
use hyper::body::{Bytes, Incoming};
use hyper::header::{self, HeaderName, HeaderValue};
use hyper::{Method, Request, Response, StatusCode, server::conn::http1, service::service_fn};
use hyper_util::rt::TokioIo;
use std::collections::BTreeMap;
use std::convert::Infallible;
use std::net::SocketAddr;
use std::sync::{Arc, Mutex, PoisonError};
use std::thread::JoinHandle;
use tokio::{net::TcpListener, runtime, sync::oneshot};

/// What was asked of the server, and what came of it.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Seen {
    pub method: String,
    pub path: String,
    pub status: u16,
}

/// A server of a site on the loopback address, run by one thread. A request can name nothing but a file of the site,
/// which is in memory. Once dropped, all its sockets are closed, the idle ones of a browser too.
pub struct Server {
    address: SocketAddr,
    shared: Arc<Shared>,
    stop: Option<oneshot::Sender<()>>,
    thread: Option<JoinHandle<()>>,
}

struct Shared {
    site: Mutex<Site>,
    /// Files that are sent compressed.
    packed: Mutex<BTreeMap<String, Vec<u8>>>,
    log: Mutex<Vec<Seen>>,
}

impl Server {
    /// Starts on `port`; 0 takes a free one.
    pub fn start(site: Site, port: u16) -> Result<Server> {
        let shared = Arc::new(Shared { site: Mutex::new(site), packed: Mutex::default(), log: Mutex::default() });
        let runtime = runtime::Builder::new_current_thread().enable_io().build()?;
        let listener =
            runtime.block_on(TcpListener::bind(("127.0.0.1", port))).with_context(|| format!("port {port}"))?;
        let address = listener.local_addr()?;
        let (stop, stopped) = oneshot::channel();
        let accept = accept(listener, shared.clone());
        let thread = std::thread::spawn(move || {
            runtime.block_on(async {
                tokio::select! { () = accept => {}, _ = stopped => {} }
            });
        });
        Ok(Server { address, shared, stop: Some(stop), thread: Some(thread) })
    }

    /// Address to open.
    pub fn url(&self) -> String {
        format!("http://localhost:{}/", self.port())
    }

    /// Port it listens on.
    pub fn port(&self) -> u16 {
        self.address.port()
    }

    /// Serves other files from now on.
    pub fn deploy(&self, site: Site) {
        *self.shared.site.lock().unwrap_or_else(PoisonError::into_inner) = site;
    }

    /// Sends the files it has now compressed from now on, as a host does. It takes a second or, unoptimised, many.
    pub fn compress(&self) {
        let site = self.shared.site.lock().unwrap_or_else(PoisonError::into_inner).clone();
        let packed = site.0.into_iter().map(|(name, bytes)| (name, brotli(&bytes))).collect();
        *self.shared.packed.lock().unwrap_or_else(PoisonError::into_inner) = packed;
    }

    /// Everything asked for so far.
    pub fn seen(&self) -> Vec<Seen> {
        self.shared.log.lock().unwrap_or_else(PoisonError::into_inner).clone()
    }

    /// Serves until the program ends.
    pub fn wait(mut self) {
        if let Some(thread) = self.thread.take() {
            let _ = thread.join();
        }
    }
}

impl Drop for Server {
    fn drop(&mut self) {
        drop(self.stop.take());
        if let Some(thread) = self.thread.take() {
            let _ = thread.join();
        }
    }
}

async fn accept(listener: TcpListener, shared: Arc<Shared>) {
    loop {
        let Ok((stream, _)) = listener.accept().await else { continue };
        let shared = shared.clone();
        let service = service_fn(move |request| {
            let response = respond(&shared, &request);
            async { Ok::<_, Infallible>(response) }
        });
        tokio::spawn(http1::Builder::new().serve_connection(TokioIo::new(stream), service));
    }
}

fn respond(shared: &Shared, request: &Request<Incoming>) -> Response<Full<Bytes>> {
    let path = request.uri().path();
    let name = if path == "/" { PAGE } else { path.trim_start_matches('/') };
    let mut response = Response::new(Full::default());
    let mut head = |name: HeaderName, value: &str| {
        // OK because every value is our own ASCII text.
        response.headers_mut().extend(HeaderValue::from_str(value).ok().map(|value| (name, value)));
    };
    head(header::X_CONTENT_TYPE_OPTIONS, "nosniff");
    head(header::REFERRER_POLICY, "no-referrer");
    head(header::CACHE_CONTROL, "no-cache");
    if !matches!(*request.method(), Method::GET | Method::HEAD) {
        head(header::ALLOW, "GET, HEAD");
        *response.status_mut() = StatusCode::METHOD_NOT_ALLOWED;
    } else if let Some(bytes) = shared.site.lock().unwrap_or_else(PoisonError::into_inner).0.get(name) {
        // The single file brings its own policy, and this one would stop it.
        if name != SINGLE {
            head(header::CONTENT_SECURITY_POLICY, &format!("{}; {}", policy::SERVED, policy::HEADER_ONLY));
        }
        head(header::CONTENT_TYPE, media_type(name));
        let packed = shared.packed.lock().unwrap_or_else(PoisonError::into_inner).get(name).cloned();
        match packed.filter(|_| reads_brotli(request)) {
            Some(packed) => {
                head(header::CONTENT_ENCODING, "br");
                *response.body_mut() = Full::from(packed);
            }
            None => *response.body_mut() = Full::from(bytes.clone()),
        }
    } else {
        head(header::CONTENT_TYPE, "text/plain; charset=utf-8");
        *response.status_mut() = StatusCode::NOT_FOUND;
        *response.body_mut() = Full::from("There is no such file.\n");
    }
    shared.log.lock().unwrap_or_else(PoisonError::into_inner).push(Seen {
        method: request.method().to_string(),
        path: path.to_owned(),
        status: response.status().as_u16(),
    });
    response
}

fn reads_brotli(request: &Request<Incoming>) -> bool {
    let accepted = request.headers().get(header::ACCEPT_ENCODING).and_then(|value| value.to_str().ok());
    accepted.is_some_and(|list| list.split(',').any(|one| one.trim() == "br"))
}

/// Media type by the end of the name.
pub fn media_type(name: &str) -> &'static str {
    match name.rsplit('.').next() {
        Some("html") => "text/html; charset=utf-8",
        Some("js") => "text/javascript; charset=utf-8",
        Some("css") => "text/css; charset=utf-8",
        Some("wasm") => "application/wasm",
        Some("svg") => "image/svg+xml",
        Some("png") => "image/png",
        Some("webmanifest") => "application/manifest+json",
        _ => "application/octet-stream",
    }
}
