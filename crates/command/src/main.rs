//! `hullward`: rival formulations run natively by the same engine as the page.
//!
//! Results go to standard output, everything else to standard error. The exit status says how
//! it went (see [`ending::Ending`]).

mod cells;
mod clock;
mod complain;
mod digest;
mod ending;
mod explain;
mod help;
mod list;
mod options;
mod pack;
mod progress;
mod prove;
mod queue;
mod read;
mod record;
mod run;
mod same;
mod second;
mod source;
mod table;
mod verify;
mod write;

use std::io::Write;
use std::process::ExitCode;

use ending::Ending;
use options::Call;

fn main() -> ExitCode {
    let arguments: Vec<String> =
        std::env::args_os().skip(1).map(|word| word.to_string_lossy().into_owned()).collect();
    let (mut out, mut err) = (std::io::stdout().lock(), std::io::stderr());
    let ended = match options::parse(&arguments) {
        Ok(call) => carry_out(&call, &mut out, &mut err),
        Err(message) => writeln!(err, "hullward: {message}").map(|()| Ending::Wrong),
    };
    let flushed = out.flush();
    match ended.and_then(|ending| flushed.map(|()| ending)) {
        Ok(ending) => ending.code(),
        // Who reads our output has closed it (`hullward list | head`): nothing is wrong.
        Err(error) if error.kind() == std::io::ErrorKind::BrokenPipe => Ending::Done.code(),
        Err(error) => {
            let _ = writeln!(err, "hullward: the output cannot be written: {error}");
            Ending::Wrong.code()
        }
    }
}

fn carry_out(call: &Call, out: &mut dyn Write, err: &mut dyn Write) -> std::io::Result<Ending> {
    match call {
        Call::Help(topic) => write!(out, "{}", help::text(*topic)).map(|()| Ending::Done),
        Call::Explain(code) => explain::explain(code, out, err),
        Call::Version => writeln!(out, "hullward {}", engine::VERSION).map(|()| Ending::Done),
        Call::Run(options) => run::run(options, out, err),
        Call::Read(file) => read::read(file, out, err),
        Call::Write(options) => write::write(options, out, err),
        Call::Prove(options) => prove::prove(options, out, err),
        Call::List(id) => list::list(id.as_deref(), out, err),
        Call::Digest(options) => digest::digest(options, out, err),
        Call::Cells(options) => cells::list(options, out, err),
        Call::Drift(options) => pack::drift(options, out, err),
        Call::Gather(options) => cells::gather(options, out, err),
    }
}
