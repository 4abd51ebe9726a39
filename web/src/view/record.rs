//! The decision record, saved in one of its forms, with what goes beside it.

use record::message::Request;
use record::pack::Pack;
use record::results::RivalResult;
use yew::prelude::*;

use crate::browser::handover::{Handed, hand_over};
use crate::browser::share::download;
use crate::browser::worker::WorkerHandle;
use crate::state::board::Board;
use crate::state::document::Document;
use crate::state::on_record::{OnRecord, Paper};
use crate::state::same::results as results_of;
use crate::state::share::{file_name, file_of};
use crate::state::studies::Shelf;
use crate::state::words::sentence;
use crate::view::handover::taken;

#[derive(Properties, PartialEq, Clone)]
pub(crate) struct RecordProps {
    pub(crate) document: Document,
    pub(crate) board: Board,
    pub(crate) shelf: Shelf,
}

/// What can be saved.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Form {
    Set(Paper),
    Csv,
    Pack,
}

/// The buttons: form, name for tests, words, and the ending of the file.
const FORMS: [(Form, &str, &str, &str); 6] = [
    (Form::Set(Paper::Html), "record-html", "Save to print", "decision.html"),
    (Form::Set(Paper::Markdown), "record-markdown", "Markdown", "decision.md"),
    (Form::Set(Paper::Json), "record-json", "JSON", "decision.json"),
    (Form::Csv, "record-csv", "CSV", "results.csv"),
    (Form::Set(Paper::Svg), "record-svg", "SVG", "drawings.svg"),
    (Form::Pack, "pack", "Pack", "pack.json"),
];

/// What holds the worker that writes, and what is said of it.
#[derive(Clone)]
struct Writing {
    worker: std::rc::Rc<std::cell::RefCell<Option<WorkerHandle>>>,
    said: UseStateSetter<String>,
}

impl Writing {
    /// Asks a worker; what it answers goes to `then`.
    fn ask(&self, request: &Request, then: impl Fn(Result<Handed, String>) + 'static) {
        let worker = self.worker.clone();
        let hear = Callback::from(move |answer| {
            worker.replace(None);
            then(answer);
        });
        match hand_over(request, hear) {
            Ok(started) => drop(self.worker.replace(Some(started))),
            Err(why) => self.failed(&why),
        }
    }

    fn failed(&self, why: &str) {
        self.said.set(sentence(&format!("Not written: {why}")));
    }

    fn save(&self, file: &str, text: &str) {
        download(file, text);
        self.said.set(format!("{file} is saved."));
    }

    /// Asks a worker for a text and saves it.
    fn written(&self, request: &Request, file: String) {
        let said = self.said.clone();
        self.ask(request, move |answer| said.set(taken(&file, answer)));
    }

    /// Saves the record, once a worker has said what it repeats of the scenario.
    fn record(&self, record: OnRecord, paper: Paper, file: String) {
        let own = self.clone();
        let request = Request::State(record.scenario_text());
        self.ask(&request, move |answer| match answer {
            Ok(Handed::Stated(stated)) => {
                own.save(&file, &record.clone().with(stated).text(paper));
            }
            Ok(Handed::Written(_)) => {}
            Err(why) => own.failed(&why),
        });
    }
}

impl RecordProps {
    /// What each rival gave, as the command names it.
    fn results(&self) -> Vec<RivalResult> {
        let (scenario, preset) = (&self.document.title, self.document.run.mode());
        let named =
            |one| RivalResult { scenario: scenario.clone(), preset: preset.to_owned(), ..one };
        results_of(&self.document, &self.board).into_iter().map(named).collect()
    }

    fn save(&self, form: Form, file: String, writing: &Writing) {
        let mut results = self.results();
        match form {
            Form::Set(paper) => {
                let record = OnRecord::of(&self.document, results, &self.shelf);
                writing.record(record, paper, file);
            }
            Form::Csv => writing.save(&file, &report::csv::csv(&results)),
            Form::Pack => {
                results.retain(|one| one.root.is_some());
                let scenario = self.document.scenario();
                let pack = Pack::new(env!("CARGO_PKG_VERSION"), &scenario, &results);
                writing.save(&file, &report::pack::json(&pack));
            }
        }
    }
}

/// The record of all that the page has found, saved as a file.
#[component]
pub(crate) fn Record(props: &RecordProps) -> Html {
    let said = use_state_eq(String::new);
    let worker = use_mut_ref(|| None::<WorkerHandle>);
    let writing = Writing { worker, said: said.setter() };
    let factor = use_state_eq(|| "1".to_owned());
    let save = |form: Form, ending: &str| {
        let (props, writing) = (props.clone(), writing.clone());
        let file = file_of(&props.document.title, ending);
        Callback::from(move |_: MouseEvent| props.save(form, file.clone(), &writing))
    };
    let strip = {
        let (document, factor, writing) = (props.document.clone(), factor.clone(), writing.clone());
        Callback::from(move |_: MouseEvent| {
            let (scenario, factor) = (document.file(), factor.trim().to_owned());
            writing.written(&Request::Strip { scenario, factor }, file_name("no names"));
        })
    };
    let scale = {
        let set = factor.setter();
        Callback::from(move |event: InputEvent| {
            set.set(event.target_unchecked_into::<web_sys::HtmlInputElement>().value());
        })
    };
    html! {
        <div class="study">
            <div class="heading">
                <h3>{ "Decision record" }</h3>
                <span class="row">
                    for (form, id, words, ending) in FORMS {
                        <button type="button" data-testid={id} onclick={save(form, ending)}>{ words }</button>
                    }
                </span>
            </div>
            <p class="soft">
                { "The question, the instance, what was found and answered above, what would reopen the decision, \
                   the formulations, and how to see the same. CSV is the table of results, SVG the drawings. The pack \
                   is for regression tests: the scenario with what each rival gave so far, to be opened here or run \
                   by hullward drift." }
            </p>
            <div class="row">
                <button type="button" data-testid="stripped" onclick={strip}>{ "Scenario without names" }</button>
                <label class="family">
                    { "costs times" }
                    <input type="text" inputmode="decimal" size="6" data-testid="stripped-factor" value={(*factor).clone()} oninput={scale} />
                </label>
            </div>
            <p class="soft" role="status" data-testid="record-said">{ (*said).clone() }</p>
        </div>
    }
}
