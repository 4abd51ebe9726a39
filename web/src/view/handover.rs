//! A rival taken away as a file: MPS, LaTeX, journal notation, or a scenario with it alone.

use record::handover::Form;
use record::message::{LaneJob, Request};
use record::scenario::Scenario;
use yew::prelude::*;

use crate::browser::handover::{Handed, hand_over};
use crate::browser::share::download;
use crate::browser::worker::WorkerHandle;
use crate::state::share::{file_name, file_of};
use crate::state::words::{advice, sentence};

#[derive(Properties, PartialEq)]
pub(crate) struct TakeProps {
    pub(crate) letter: String,
    pub(crate) title: String,
    pub(crate) job: LaneJob,
}

/// The forms that the engine writes, each with its name and the ending of its file.
const FORMS: [(Form, &str, &str); 3] =
    [(Form::Mps, "MPS", "mps"), (Form::Latex, "LaTeX", "tex"), (Form::Text, "Text", "txt")];

/// The menu, and what is said of the file that was made.
#[component]
pub(crate) fn TakeAway(props: &TakeProps) -> Html {
    let said = use_state_eq(String::new);
    let worker = use_mut_ref(|| None::<WorkerHandle>);
    let title = format!("{} {}", props.letter, props.title);
    let take = |form: Form, name: &'static str, ending: &'static str| {
        let (job, worker, said) = (props.job.clone(), worker.clone(), said.setter());
        let file = file_of(&title, ending);
        Callback::from(move |_: MouseEvent| {
            said.set(format!("Writing {name}."));
            let (tell, end, file) = (said.clone(), worker.clone(), file.clone());
            let hear = Callback::from(move |answer| {
                tell.set(taken(&file, answer));
                end.replace(None);
            });
            match hand_over(&Request::Write(form, Box::new(job.clone())), hear) {
                Ok(started) => drop(worker.replace(Some(started))),
                Err(why) => said.set(taken("", Err(why))),
            }
        })
    };
    let alone = {
        let (job, title, said) = (props.job.clone(), props.title.clone(), said.setter());
        let file = file_name(&format!("{} {title}", props.letter));
        Callback::from(move |_: MouseEvent| {
            download(&file, record::file::print(&alone(&job, &title)).as_str());
            said.set(format!("{file} is saved."));
        })
    };
    html! {
        <details class="take" data-testid="take">
            <summary aria-label={format!("Take away {}", props.letter)}>{ "Take away" }</summary>
            <div class="acts">
                for (form, name, ending) in FORMS {
                    <button type="button" data-testid={ending} onclick={take(form, name, ending)}>{ name }</button>
                }
                <button type="button" data-testid="alone" onclick={alone}>{ "Scenario" }</button>
            </div>
            <p class="small" role="status" data-testid="taken">{ (*said).clone() }</p>
        </details>
    }
}

/// Saves what was made; what to say of it.
pub(crate) fn taken(file: &str, answer: Result<Handed, String>) -> String {
    match answer {
        Ok(Handed::Written(written)) => {
            download(file, written.text.as_str());
            let notes = written.notes.iter().map(|note| advice(note));
            [vec![format!("{file} is saved.")], notes.collect()].concat().join(" ")
        }
        Ok(Handed::Stated(_)) => String::new(),
        Err(why) => sentence(&format!("Not written: {why}")),
    }
}

/// A scenario with this rival alone.
pub(crate) fn alone(job: &LaneJob, title: &str) -> Scenario {
    Scenario {
        title: title.to_owned(),
        seed: job.seed,
        instance: job.instance.clone(),
        rivals: vec![job.rival.clone()],
        run: job.settings.clone(),
        ..Scenario::default()
    }
}
