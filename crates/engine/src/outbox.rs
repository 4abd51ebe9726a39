//! Replies that wait to be taken. Batches of events that follow each other are one batch, and
//! of several words on how far the work is only the last is kept: so the sender may take them
//! as seldom as it likes, and the events are the same.

use std::collections::VecDeque;
use std::mem::discriminant;

use record::message::{Envelope, Reply, RunNumber};

/// The replies in order.
#[derive(Debug, Default)]
pub(crate) struct Outbox {
    next: u64,
    waiting: VecDeque<Envelope>,
}

impl Outbox {
    /// Adds a reply of a run.
    pub(crate) fn push(&mut self, run: RunNumber, reply: Reply) {
        let Some(reply) = self.merge(run, reply) else { return };
        self.waiting.push_back(Envelope { run, sequence: self.next, reply });
        self.next += 1;
    }

    /// Takes everything.
    pub(crate) fn take(&mut self) -> Vec<Envelope> {
        self.waiting.drain(..).collect()
    }

    /// Puts a reply into one that waits; gives it back when it needs an envelope of its own.
    fn merge(&mut self, run: RunNumber, reply: Reply) -> Option<Reply> {
        let mergeable = |envelope: &&mut Envelope| {
            envelope.run == run && matches!(envelope.reply, Reply::Batch(_) | Reply::Progress(_))
        };
        let mut recent = self.waiting.iter_mut().rev().take_while(mergeable);
        let twin = recent.find(|envelope| discriminant(&envelope.reply) == discriminant(&reply));
        match (twin.map(|envelope| &mut envelope.reply), reply) {
            (Some(Reply::Batch(events)), Reply::Batch(more)) => events.extend(more),
            (Some(Reply::Progress(old)), Reply::Progress(new)) => *old = new,
            (_, reply) => return Some(reply),
        }
        None
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use record::event::Event;
    use record::message::Progress;

    fn batch(nodes: u32) -> Reply {
        Reply::Batch(vec![Event::Bound { bound: 1.0, nodes }])
    }

    fn progress(ticks: u64) -> Reply {
        Reply::Progress(Progress { doing: "searching".to_owned(), ticks, iterations: 0 })
    }

    #[test]
    fn batches_join_and_only_the_last_progress_is_kept() {
        let mut outbox = Outbox::default();
        let run = RunNumber(1);
        for reply in [batch(1), progress(10), batch(2), progress(20), Reply::Catalogue(Vec::new())]
        {
            outbox.push(run, reply);
        }
        outbox.push(run, batch(3));
        outbox.push(RunNumber(2), batch(1));
        let envelopes = outbox.take();
        let sequence: Vec<u64> = envelopes.iter().map(|envelope| envelope.sequence).collect();
        assert_eq!(sequence, [0, 1, 2, 3, 4]);
        assert!(matches!(&envelopes[0].reply, Reply::Batch(events) if events.len() == 2));
        assert_eq!(envelopes[1].reply, progress(20));
        assert!(matches!(&envelopes[3].reply, Reply::Batch(events) if events.len() == 1));
        assert!(outbox.take().is_empty());
    }
}
