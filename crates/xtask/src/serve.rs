//! A server for the built page, for this machine alone.
//!
//! It answers GET for the files that stand directly in one folder, and nothing else: a name with
//! any character beyond letters, digits, `-`, `_` and `.` has no file.

use std::fs;
use std::io::{BufRead, BufReader, Read, Write};
use std::net::{Ipv4Addr, TcpListener, TcpStream};
use std::path::{Path, PathBuf};
use std::sync::Arc;
use std::thread;
use std::time::Duration;

use crate::fault::{Attempt, Fault};

const PATIENCE: Duration = Duration::from_secs(10);
const LONGEST_REQUEST: u64 = 16 * 1024;

/// Serves a folder until the program is ended.
pub(crate) fn serve(folder: &Path, port: u16) -> Result<(), Fault> {
    if !folder.join("index.html").is_file() {
        return Err(Fault::new("the page is not built: build it by `cargo xtask page`"));
    }
    let listener = TcpListener::bind((Ipv4Addr::LOCALHOST, port))
        .attempting(format!("listen on port {port} (another may be given with --port)"))?;
    let address = listener.local_addr().attempting("learn the port")?;
    println!("http://{address}/");
    println!("   serving {}; end it with Ctrl+C", folder.display());
    answer_all(&listener, folder);
    Ok(())
}

fn answer_all(listener: &TcpListener, folder: &Path) {
    let folder: Arc<Path> = Arc::from(folder);
    for stream in listener.incoming().flatten() {
        let folder = Arc::clone(&folder);
        // A connection that breaks concerns only whoever opened it.
        thread::spawn(move || answer(stream, &folder).ok());
    }
}

fn answer(mut stream: TcpStream, folder: &Path) -> std::io::Result<()> {
    stream.set_read_timeout(Some(PATIENCE))?;
    stream.set_write_timeout(Some(PATIENCE))?;
    let mut lines = BufReader::new(stream.try_clone()?.take(LONGEST_REQUEST)).lines();
    let request = lines.next().transpose()?.unwrap_or_default();
    // The rest of the head is read so that closing does not cut the answer off.
    while lines.next().transpose()?.is_some_and(|line| !line.is_empty()) {}
    let (head, body) = reply(&request, folder);
    stream.write_all(head.as_bytes())?;
    stream.write_all(&body)
}

/// The reply to the first line of a request.
fn reply(request: &str, folder: &Path) -> (String, Vec<u8>) {
    let mut words = request.split(' ');
    let (method, target) = (words.next().unwrap_or(""), words.next().unwrap_or(""));
    if method != "GET" {
        return plain("405 Method Not Allowed", "only GET is answered");
    }
    match file(target, folder).and_then(|path| Some((content_type(&path), fs::read(path).ok()?))) {
        Some((kind, body)) => (head("200 OK", kind, body.len()), body),
        None => plain("404 Not Found", "there is no such file"),
    }
}

fn plain(status: &str, text: &str) -> (String, Vec<u8>) {
    (head(status, "text/plain; charset=utf-8", text.len()), text.as_bytes().to_vec())
}

fn head(status: &str, kind: &str, length: usize) -> String {
    format!(
        "HTTP/1.1 {status}\r\nContent-Type: {kind}\r\nContent-Length: {length}\r\n\
         Cache-Control: no-store\r\nX-Content-Type-Options: nosniff\r\nConnection: close\r\n\r\n"
    )
}

/// The file that a target names, if it may name one.
fn file(target: &str, folder: &Path) -> Option<PathBuf> {
    let path = target.split(['?', '#']).next()?.strip_prefix('/')?;
    let name = if path.is_empty() { "index.html" } else { path };
    let plain = |c: char| c.is_ascii_alphanumeric() || matches!(c, '-' | '_' | '.');
    (name.chars().all(plain) && !name.starts_with('.')).then(|| folder.join(name))
}

fn content_type(path: &Path) -> &'static str {
    match path.extension().and_then(|extension| extension.to_str()) {
        Some("html") => "text/html; charset=utf-8",
        Some("toml" | "txt") => "text/plain; charset=utf-8",
        Some("svg") => "image/svg+xml",
        _ => "application/octet-stream",
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn folder() -> PathBuf {
        Path::new(env!("CARGO_MANIFEST_DIR")).join("../../web")
    }

    #[test]
    fn a_file_of_the_folder_is_sent_whole() {
        let (head, body) = reply("GET /?from=test HTTP/1.1", &folder());
        assert!(head.starts_with("HTTP/1.1 200 OK\r\nContent-Type: text/html; charset=utf-8\r\n"));
        assert_eq!(body, fs::read(folder().join("index.html")).expect("the template"));
    }

    #[test]
    fn no_way_out_of_the_folder() {
        let targets =
            ["/../Cargo.toml", "/..", "/%2e%2e/Cargo.toml", "//etc/passwd", "/src/lib.rs", "x", ""];
        for target in targets {
            let (head, _) = reply(&format!("GET {target} HTTP/1.1"), &folder());
            assert!(head.starts_with("HTTP/1.1 404"), "{target:?}: {head}");
        }
    }

    #[test]
    fn only_get_is_answered() {
        for request in ["POST / HTTP/1.1", "HEAD / HTTP/1.1", "", "nonsense"] {
            assert!(reply(request, &folder()).0.starts_with("HTTP/1.1 405"), "{request:?}");
        }
    }

    #[test]
    fn over_a_real_connection() {
        let listener = TcpListener::bind((Ipv4Addr::LOCALHOST, 0)).expect("a free port");
        let address = listener.local_addr().expect("its port");
        thread::spawn(move || answer_all(&listener, &folder()));
        let mut stream = TcpStream::connect(address).expect("the server");
        stream.write_all(b"GET /boot.js HTTP/1.1\r\nHost: here\r\n\r\n").expect("sent");
        let mut text = String::new();
        stream.read_to_string(&mut text).expect("an answer");
        assert!(text.starts_with("HTTP/1.1 200 OK\r\n"));
        assert!(text.ends_with(&fs::read_to_string(folder().join("boot.js")).expect("the script")));
    }

    #[test]
    fn an_unbuilt_page_is_said() {
        let Err(fault) = serve(Path::new("no-such-folder"), 0) else { panic!("served") };
        assert!(fault.to_string().contains("cargo xtask page"));
    }
}
