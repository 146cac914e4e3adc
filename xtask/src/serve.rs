//! `cargo xtask serve [--port N]`: builds the page and serves it on this machine alone.

use std::io;
use std::net::{Ipv4Addr, SocketAddr, TcpListener};
use std::path::{Path, PathBuf};
use std::sync::Arc;
use std::thread::JoinHandle;

use tiny_http::{Header, Method, Request, Response};

use crate::{Outcome, build, paths};

/// The port tried first when none is asked for.
pub const USUAL_PORT: u16 = 8080;

/// A browser asks for a handful of files at once.
const WORKERS: usize = 4;

/// The command; it ends only by Ctrl-C or a failure.
///
/// # Errors
/// When the arguments make no sense, the page does not build, or the port is taken.
pub fn serve(arguments: &[String]) -> Outcome {
    let port = port(arguments)?;
    build::build()?;
    let server = start_near(&paths::dist(), port)?;
    println!("Serving it at {} until Ctrl-C.", server.address());
    loop {
        std::thread::park();
    }
}

fn port(arguments: &[String]) -> Result<Option<u16>, String> {
    match arguments {
        [] => Ok(None),
        [option, port] if option == "--port" => port.parse().map(Some).map_err(|_| {
            format!("A port is a number from 0 (any free one) to 65535, not “{port}”.")
        }),
        _ => Err("Expected nothing or `--port NUMBER`.".to_owned()),
    }
}

/// On the port asked for, else on the usual one, else on any free one.
fn start_near(dir: &Path, port: Option<u16>) -> Result<Server, String> {
    match Server::start(dir, Some(port.unwrap_or(USUAL_PORT))) {
        Err(error) if port.is_none() && error.kind() == io::ErrorKind::AddrInUse => {
            println!("Port {USUAL_PORT} is taken; using another.");
            Server::start(dir, None)
        }
        tried => tried,
    }
    .map_err(|error| {
        format!(
            "Cannot serve on port {}: {error}. `--port NUMBER` takes another.",
            port.unwrap_or(USUAL_PORT)
        )
    })
}

/// Serves the files of a folder on 127.0.0.1 until stopped or dropped.
pub struct Server {
    address: SocketAddr,
    http: Arc<tiny_http::Server>,
    workers: Vec<JoinHandle<()>>,
}

impl Server {
    /// Starts serving on a port, or on any free one.
    ///
    /// # Errors
    /// When the port is taken or may not be used.
    pub fn start(dir: &Path, port: Option<u16>) -> io::Result<Self> {
        let listener = TcpListener::bind((Ipv4Addr::LOCALHOST, port.unwrap_or(0)))?;
        let address = listener.local_addr()?;
        let http =
            Arc::new(tiny_http::Server::from_listener(listener, None).map_err(io::Error::other)?);
        let workers = (0..WORKERS)
            .map(|_| {
                let (http, dir) = (Arc::clone(&http), dir.to_owned());
                std::thread::spawn(move || {
                    while let Ok(request) = http.recv() {
                        // A browser that went away before its answer is no matter of ours.
                        let _gone = answer(request, &dir);
                    }
                })
            })
            .collect();
        Ok(Self {
            address,
            http,
            workers,
        })
    }

    /// Where the page is: `http://127.0.0.1:PORT/`.
    pub fn address(&self) -> String {
        format!("http://{}/", self.address)
    }

    /// Stops serving, which dropping does as well.
    pub fn stop(self) {}
}

impl Drop for Server {
    fn drop(&mut self) {
        for _ in &self.workers {
            self.http.unblock();
        }
        for worker in self.workers.drain(..) {
            // A worker that panicked has said so already.
            let _panicked = worker.join();
        }
    }
}

fn answer(request: Request, dir: &Path) -> io::Result<()> {
    if !matches!(request.method(), Method::Get | Method::Head) {
        let says = format!(
            "Only GET and HEAD are answered here, not {}.\n",
            request.method()
        );
        let response = with(
            Response::from_string(says).with_status_code(405),
            "Allow",
            "GET, HEAD",
        );
        return request.respond(response);
    }
    let found = file_of(request.url())
        .and_then(|file| Some((mime(&file), std::fs::read(dir.join(&file)).ok()?)));
    let (status, mime, body) = if let Some((mime, body)) = found {
        (200, mime, body)
    } else {
        let says = format!(
            "Nothing is served at {}; the page is at /.\n",
            request.url()
        );
        (404, "text/plain; charset=utf-8", says.into_bytes())
    };
    let response = Response::from_data(body).with_status_code(status);
    let response = with(response, "Content-Type", mime);
    // A page built a moment ago must not be hidden by what the browser kept of the last one.
    let response = with(response, "Cache-Control", "no-cache");
    request.respond(response)
}

fn with<R: io::Read>(mut response: Response<R>, name: &str, value: &str) -> Response<R> {
    if let Ok(header) = Header::from_bytes(name, value) {
        response.add_header(header);
    }
    response
}

/// The file an address asks for, relative to the folder; None for one that cannot be inside it.
fn file_of(url: &str) -> Option<PathBuf> {
    let path = url.split(['?', '#']).next()?;
    let path = decoded(path)?;
    let mut file = PathBuf::new();
    for part in path.strip_prefix('/')?.split('/') {
        // A colon or a backslash leaves the folder on some systems.
        if part == "." || part == ".." || part.contains(['\\', ':', '\0']) {
            return None;
        }
        file.push(part);
    }
    if path.ends_with('/') {
        file.push("index.html");
    }
    Some(file)
}

/// The path with its `%xx` put back; None where that is no text.
fn decoded(path: &str) -> Option<String> {
    let mut bytes = Vec::with_capacity(path.len());
    let mut rest = path.bytes();
    while let Some(byte) = rest.next() {
        bytes.push(if byte == b'%' {
            let digit = |byte: u8| char::from(byte).to_digit(16);
            let (high, low) = (digit(rest.next()?)?, digit(rest.next()?)?);
            u8::try_from(high * 16 + low).ok()?
        } else {
            byte
        });
    }
    String::from_utf8(bytes).ok()
}

/// What a file is, by its ending. Browsers refuse wasm, scripts and style sheets called anything else.
fn mime(file: &Path) -> &'static str {
    match file.extension().and_then(|ending| ending.to_str()) {
        Some("html") => "text/html; charset=utf-8",
        Some("css") => "text/css; charset=utf-8",
        Some("js" | "mjs") => "text/javascript; charset=utf-8",
        Some("wasm") => "application/wasm",
        Some("json") => "application/json",
        Some("webmanifest") => "application/manifest+json",
        Some("svg") => "image/svg+xml",
        Some("png") => "image/png",
        Some("ico") => "image/x-icon",
        Some("txt") => "text/plain; charset=utf-8",
        Some("woff2") => "font/woff2",
        _ => "application/octet-stream",
    }
}

#[cfg(test)]
mod tests {
    use std::io::{Read, Write};
    use std::net::TcpStream;

    use super::*;
    use crate::scratch::Scratch;

    #[test]
    fn addresses_name_files() {
        let file = |url| file_of(url).map(|file| file.to_str().unwrap().to_owned());
        assert_eq!(file("/").as_deref(), Some("index.html"));
        assert_eq!(file("/?job=1").as_deref(), Some("index.html"));
        assert_eq!(file("/page.js#x").as_deref(), Some("page.js"));
        assert_eq!(file("/icons/a%20b.svg").as_deref(), Some("icons/a b.svg"));
        assert_eq!(file("/icons/").as_deref(), Some("icons/index.html"));
        assert_eq!(file("/%C3%A9.txt").as_deref(), Some("é.txt"));
        assert_eq!(file("/a..b").as_deref(), Some("a..b"));
    }

    #[test]
    fn nothing_outside_the_folder_has_an_address() {
        for url in [
            "",
            "page.js",
            "http://elsewhere/",
            "/..",
            "/../secret",
            "/icons/../../secret",
            "/%2e%2e/secret",
            "/%2E./secret",
            "/icons%2f..%2f..%2fsecret",
            r"/..\secret",
            "/%5c..%5csecret",
            "/c:/secret",
            "/a%00b",
            "/%",
            "/%2",
            "/%zz",
            "/%+1",
            "/%ff",
        ] {
            assert_eq!(file_of(url), None, "{url}");
        }
        // A second slash must not start over at the root of the file system.
        assert_eq!(file_of("//etc/passwd"), Some(PathBuf::from("etc/passwd")));
        assert_eq!(file_of("/%2fetc/passwd"), Some(PathBuf::from("etc/passwd")));
    }

    #[test]
    fn files_are_what_browsers_want_them_to_be() {
        let of = |name: &str| mime(Path::new(name));
        assert_eq!(of("page_bg.wasm"), "application/wasm");
        assert_eq!(of("page.js"), "text/javascript; charset=utf-8");
        assert_eq!(of("manifest.webmanifest"), "application/manifest+json");
        assert_eq!(of("icons/icon.svg"), "image/svg+xml");
        assert_eq!(of("index.html"), "text/html; charset=utf-8");
        assert_eq!(of("no-ending"), "application/octet-stream");
    }

    #[test]
    fn the_port_is_a_number() {
        let port = |words: &[&str]| {
            port(
                &words
                    .iter()
                    .map(|&word| word.to_owned())
                    .collect::<Vec<_>>(),
            )
        };
        assert_eq!(port(&[]), Ok(None));
        assert_eq!(port(&["--port", "9000"]), Ok(Some(9000)));
        assert!(
            port(&["--port", "70000"])
                .unwrap_err()
                .contains("not “70000”")
        );
        assert!(port(&["--port"]).is_err() && port(&["9000"]).is_err());
    }

    #[test]
    fn a_taken_port_is_given_up_only_if_nobody_asked_for_it() {
        let dir = Scratch::with(&[]);
        // Whoever holds the usual port, this test or another program, it is taken now.
        let _held = TcpListener::bind((Ipv4Addr::LOCALHOST, USUAL_PORT));
        let server = start_near(dir.path(), None).unwrap();
        assert_ne!(server.address.port(), USUAL_PORT);
        let said = start_near(dir.path(), Some(server.address.port()))
            .err()
            .unwrap();
        assert!(said.contains("`--port NUMBER` takes another"), "{said}");
    }

    /// Sends one request and gives the whole answer.
    fn ask(address: &str, request: &str) -> String {
        let host = address.trim_start_matches("http://").trim_end_matches('/');
        let mut stream = TcpStream::connect(host).unwrap();
        write!(
            stream,
            "{request} HTTP/1.1\r\nHost: {host}\r\nConnection: close\r\n\r\n"
        )
        .unwrap();
        let mut answer = Vec::new();
        stream.read_to_end(&mut answer).unwrap();
        String::from_utf8(answer).unwrap()
    }

    #[test]
    fn a_folder_is_served_and_nothing_beside_it() {
        let outer = Scratch::with(&[
            ("secret", "not for you"),
            ("dist/index.html", "<p>the page"),
            ("dist/page_bg.wasm", "\0asm"),
        ]);
        let dir = outer.path().join("dist");
        let server = Server::start(&dir, None).unwrap();
        let address = server.address();

        let page = ask(&address, "GET /");
        assert!(page.starts_with("HTTP/1.1 200 "), "{page}");
        assert!(
            page.contains("Content-Type: text/html; charset=utf-8\r\n"),
            "{page}"
        );
        assert!(page.contains("Cache-Control: no-cache\r\n"), "{page}");
        assert!(page.ends_with("\r\n\r\n<p>the page"), "{page}");

        let wasm = ask(&address, "GET /page_bg.wasm?v=1");
        assert!(
            wasm.contains("Content-Type: application/wasm\r\n"),
            "{wasm}"
        );
        assert!(wasm.ends_with("\0asm"), "{wasm}");

        let head = ask(&address, "HEAD /");
        assert!(head.starts_with("HTTP/1.1 200 "), "{head}");
        assert!(head.contains("Content-Length: 11\r\n"), "{head}");
        assert!(head.ends_with("\r\n\r\n"), "{head}");

        for outside in [
            "GET /../secret",
            "GET /%2e%2e/secret",
            "GET /missing",
            "GET /icons",
        ] {
            let answer = ask(&address, outside);
            assert!(answer.starts_with("HTTP/1.1 404 "), "{outside}: {answer}");
            assert!(
                answer.contains("Nothing is served at /"),
                "{outside}: {answer}"
            );
        }
        let post = ask(&address, "POST /");
        assert!(post.starts_with("HTTP/1.1 405 "), "{post}");

        let port = server.address.port();
        let taken = Server::start(&dir, Some(port)).err().unwrap();
        assert_eq!(taken.kind(), io::ErrorKind::AddrInUse);
        server.stop();
    }
}
