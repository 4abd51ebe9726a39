//! The proof of a log that was opened from a file: how far it is, and a Stop.

use yew::prelude::*;

use crate::browser::proving::{Told, prove};
use crate::browser::worker::WorkerHandle;
use crate::view::share::notice::Notice;

/// A log's file: its name and its bytes.
pub(crate) type LogFile = (String, Vec<u8>);

#[derive(Properties, PartialEq)]
pub(crate) struct ProofProps {
    /// The log that was opened last.
    pub(crate) log: Option<std::rc::Rc<LogFile>>,
    /// Takes what came of it, and that nothing is being proved.
    pub(crate) end: Callback<Notice>,
}

/// The line; nothing while nothing is proved.
#[component]
pub(crate) fn Proof(props: &ProofProps) -> Html {
    let doing = use_state_eq(String::new);
    let worker = use_mut_ref(|| None::<WorkerHandle>);
    {
        let (set, worker, end) = (doing.setter(), worker.clone(), props.end.clone());
        use_effect_with(props.log.clone(), move |log| {
            worker.replace(None);
            let Some(log) = log.clone() else { return };
            set.set("reading the log".to_owned());
            let name = log.0.clone();
            let tell = {
                let (end, name) = (end.clone(), name.clone());
                Callback::from(move |told| match told {
                    Told::Doing(words) => set.set(words),
                    Told::Ended(words) => end.emit(Notice::of(format!("{name}, {words}"))),
                })
            };
            match prove(log.1.clone(), tell) {
                Ok(started) => drop(worker.replace(Some(started))),
                Err(why) => end.emit(Notice::of(format!("{name} was not proved: {why}."))),
            }
        });
    }
    let Some(log) = &props.log else { return Html::default() };
    let stop = {
        let (end, name, doing) = (props.end.clone(), log.0.clone(), doing.clone());
        Callback::from(move |_: MouseEvent| {
            worker.replace(None);
            let said = format!("{name}: stopped while {}, so this is no proof.", *doing);
            end.emit(Notice::of(said));
        })
    };
    html! {
        <p class="row">
            <span data-testid="proving">{ format!("{}, {}", log.0, *doing) }</span>
            <button type="button" data-testid="stop-proving" onclick={stop}>{ "Stop" }</button>
        </p>
    }
}
