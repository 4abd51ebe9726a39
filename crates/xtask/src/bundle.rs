//! From the sources of the page to one file.
//!
//! The three wasm modules are compiled, get their JavaScript glue, and are packed with the boot
//! script and the style into one HTML file that fetches nothing. Its size is held to a budget, and
//! so is that of what comes before the engine in it.

use std::fs;
use std::io::Write;
use std::path::Path;

use flate2::Compression;
use flate2::write::GzEncoder;
use wasm_bindgen_cli_support::Bindgen;

use crate::compiler::{Compiler, TARGET};
use crate::fault::{Attempt, Fault};
use crate::html::{self, Parts};
use crate::pack::pack;
use crate::process::{run, step};
use crate::workplace::Workplace;

/// What the file may weigh up to the engine, in bytes of gzip: with it the page opens, draws and takes
/// input, while the rest of the file arrives.
const FIRST_BUDGET: usize = 516 * 1024;
/// What the whole page may weigh as a server would send it, in bytes of gzip: the engine with its readers,
/// cuts, proofs, studies and catalogue takes two thirds, the second LP code a tenth. All are built for size,
/// but for the kernel; `wasm-opt -Oz` makes the engine a sixth smaller and, packed, a tenth larger.
const BUDGET: usize = 1456 * 1024;

const PAGE: &str = "hullward-web";
const ENGINE: &str = "hullward-worker";
const OPINION: &str = "hullward-opinion-worker";

/// Builds the page into `web/dist`.
pub(crate) fn build(place: &Workplace) -> Result<(), Fault> {
    let compiler = step("find a compiler for wasm", Compiler::find)?;
    step("compile the modules", || run(&mut compiler.build(place, &[PAGE, ENGINE, OPINION])))?;
    step("bundle the page", || bundle(place))
}

/// A module with its glue.
struct Module {
    wasm: Vec<u8>,
    glue: String,
}

fn bundle(place: &Workplace) -> Result<(), Fault> {
    let page = bind(place, PAGE)?;
    let engine = bind(place, ENGINE)?;
    let opinion = bind(place, OPINION)?;
    let unpack = read(&place.web().join("unpack.js"))?;
    let boot = read(&place.web().join("boot.js"))?;
    let style = read(&place.web().join("style.css"))?;
    let template = read(&place.web().join("index.html"))?;
    let engine_script = worker_script(place, &engine, "worker/host.js")?;
    let opinion_script = worker_script(place, &opinion, "opinion/host.js")?;
    let opening: [&[u8]; 3] = [&page.wasm, engine_script.as_bytes(), opinion_script.as_bytes()];
    let [page_pack, engine_pack, opinion_pack] =
        pack([&opening, &[&engine.wasm], &[&opinion.wasm]])?;
    let file = html::assemble(
        &template,
        &Parts {
            style: &style,
            page: &page_pack,
            engine: &engine_pack,
            opinion: &opinion_pack,
            page_glue: &page.glue,
            boot: &format!("{unpack}\n{boot}"),
        },
    )?;
    write(place, &file)?;
    for (what, module, pack) in [
        ("page", &page, &page_pack),
        ("engine", &engine, &engine_pack),
        ("opinion", &opinion, &opinion_pack),
    ] {
        println!(
            "   {what}: {} KB, packed {} KB",
            kilobytes(module.wasm.len()),
            kilobytes(pack.size)
        );
    }
    weigh("page glue", page.glue.len(), gzip(page.glue.as_bytes())?.len());
    weigh("style", style.len(), gzip(style.as_bytes())?.len());
    let first = gzip(html::up_to_the_engine(&file).as_bytes())?.len();
    within_budget("what the page opens with", first, FIRST_BUDGET)?;
    within_budget("the whole page", gzip(file.as_bytes())?.len(), BUDGET)
}

/// The script of a worker: its module's glue and its side of the page.
fn worker_script(place: &Workplace, module: &Module, host: &str) -> Result<String, Fault> {
    Ok(format!("{}\n{}", module.glue, read(&place.web().join(host))?))
}

/// Gives a compiled module its glue, and takes names and other ballast out of it.
fn bind(place: &Workplace, package: &str) -> Result<Module, Fault> {
    let file = format!("{}.wasm", package.replace('-', "_"));
    let path = place.wasm_target().join(TARGET).join("page").join(file);
    let mut bindgen = Bindgen::new();
    bindgen.input_path(&path).typescript(false).omit_default_module_path(true);
    bindgen.remove_name_section(true).remove_producers_section(true);
    bindgen.no_modules(true).attempting("choose plain scripts for the glue")?;
    let mut output =
        bindgen.generate_output().attempting(format!("make the glue of {}", path.display()))?;
    let with_files = output.snippets().iter().filter(|(_, files)| !files.is_empty());
    if let Some(name) = with_files.map(|(name, _)| name).chain(output.local_modules().keys()).next()
    {
        return Err(Fault::new(format!(
            "{package} brings a JavaScript file of its own, {name:?}, which one file cannot hold; \
             find the dependency that does so and take it out"
        )));
    }
    let glue = output.js().to_owned();
    Ok(Module { wasm: output.wasm_mut().emit_wasm(), glue })
}

fn write(place: &Workplace, file: &str) -> Result<(), Fault> {
    let dist = place.dist();
    fs::create_dir_all(&dist).attempting(format!("make {}", dist.display()))?;
    for name in ["index.html", "hullward.html"] {
        let path = dist.join(name);
        fs::write(&path, file).attempting(format!("write {}", path.display()))?;
        println!("   {}", path.display());
    }
    Ok(())
}

fn read(path: &Path) -> Result<String, Fault> {
    fs::read_to_string(path).attempting(format!("read {}", path.display()))
}

fn gzip(bytes: &[u8]) -> Result<Vec<u8>, Fault> {
    let mut encoder = GzEncoder::new(Vec::new(), Compression::best());
    encoder.write_all(bytes).attempting("compress")?;
    encoder.finish().attempting("compress")
}

fn weigh(what: &str, bytes: usize, packed: usize) {
    println!("   {what}: {} KB, {} KB under gzip", kilobytes(bytes), kilobytes(packed));
}

fn kilobytes(bytes: usize) -> usize {
    bytes.div_ceil(1024)
}

fn within_budget(what: &str, packed: usize, budget: usize) -> Result<(), Fault> {
    let (size, most) = (kilobytes(packed), kilobytes(budget));
    if packed > budget {
        return Err(Fault::new(format!(
            "{what} weighs {size} KB under gzip, over its budget of {most} KB"
        )));
    }
    println!("   {what}: {size} KB of a budget of {most} KB");
    Ok(())
}

#[cfg(test)]
mod tests {
    use std::io::Read;

    use flate2::read::GzDecoder;

    use super::*;

    #[test]
    fn gzip_is_undone_by_gunzip_and_always_the_same() {
        let bytes = b"the same bytes come out for the same bytes in".repeat(50);
        let packed = gzip(&bytes).expect("memory takes every byte");
        assert!(packed.len() < bytes.len() / 5);
        assert_eq!(gzip(&bytes).expect("memory takes every byte"), packed);
        let mut unpacked = Vec::new();
        GzDecoder::new(&packed[..]).read_to_end(&mut unpacked).expect("it was just packed");
        assert_eq!(unpacked, bytes);
    }

    #[test]
    fn over_the_budget_is_a_fault_that_says_both_figures() {
        assert!(within_budget("the page", 2048, 2048).is_ok());
        let Err(fault) = within_budget("the page", 2049, 2048) else { panic!("let through") };
        let said = "the page weighs 3 KB under gzip, over its budget of 2 KB";
        assert_eq!(fault.to_string(), said);
    }
}
