//! Messages as bytes: postcard, with a limit on their size.

use std::fmt;

use serde::{Serialize, de::DeserializeOwned};

use crate::message::{Envelope, Request};
use crate::opinion::{Opinion, Relaxation};

/// The longest message, in bytes: 64 MiB.
pub const LONGEST_MESSAGE: usize = 64 << 20;

/// Why a message could not be written or read.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum WireError {
    /// It is longer than [`LONGEST_MESSAGE`].
    TooLong,
    /// It is no message of this version.
    Malformed,
}

impl fmt::Display for WireError {
    fn fmt(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        formatter.write_str(match self {
            Self::TooLong => "the message is longer than 64 MiB",
            Self::Malformed => "the bytes are no message of this version",
        })
    }
}

impl std::error::Error for WireError {}

/// A request as bytes.
///
/// # Errors
/// [`WireError::TooLong`].
pub fn write_request(request: &Request) -> Result<Vec<u8>, WireError> {
    write(request)
}

/// A request from bytes.
///
/// # Errors
/// Every [`WireError`]; bytes left over are an error.
pub fn read_request(bytes: &[u8]) -> Result<Request, WireError> {
    read(bytes)
}

/// A reply in its envelope as bytes.
///
/// # Errors
/// [`WireError::TooLong`].
pub fn write_envelope(envelope: &Envelope) -> Result<Vec<u8>, WireError> {
    write(envelope)
}

/// A reply in its envelope from bytes.
///
/// # Errors
/// Every [`WireError`]; bytes left over are an error.
pub fn read_envelope(bytes: &[u8]) -> Result<Envelope, WireError> {
    read(bytes)
}

/// A relaxation as bytes.
///
/// # Errors
/// [`WireError::TooLong`].
pub fn write_relaxation(relaxation: &Relaxation) -> Result<Vec<u8>, WireError> {
    write(relaxation)
}

/// A relaxation from bytes.
///
/// # Errors
/// Every [`WireError`]; bytes left over are an error.
pub fn read_relaxation(bytes: &[u8]) -> Result<Relaxation, WireError> {
    read(bytes)
}

/// An opinion as bytes.
///
/// # Errors
/// [`WireError::TooLong`].
pub fn write_opinion(opinion: &Opinion) -> Result<Vec<u8>, WireError> {
    write(opinion)
}

/// An opinion from bytes.
///
/// # Errors
/// Every [`WireError`]; bytes left over are an error.
pub fn read_opinion(bytes: &[u8]) -> Result<Opinion, WireError> {
    read(bytes)
}

fn write(message: &impl Serialize) -> Result<Vec<u8>, WireError> {
    let bytes = postcard::to_allocvec(message).map_err(|_| WireError::Malformed)?;
    if bytes.len() > LONGEST_MESSAGE { Err(WireError::TooLong) } else { Ok(bytes) }
}

fn read<T: DeserializeOwned>(bytes: &[u8]) -> Result<T, WireError> {
    if bytes.len() > LONGEST_MESSAGE {
        return Err(WireError::TooLong);
    }
    match postcard::take_from_bytes(bytes) {
        Ok((message, [])) => Ok(message),
        _ => Err(WireError::Malformed),
    }
}

#[cfg(test)]
mod tests;
