//! Bytes as they come to text in UTF-8, a piece at a time: decompressed, counted, decoded.

use std::io::{self, BufRead, BufReader, Read};

use encoding_rs::{Decoder, Encoding, UTF_8};
use flate2::read::MultiGzDecoder;

use super::limits::Limits;
use crate::model::weather::WeatherFault;

/// Opens a file. The text that comes out is UTF-8 if the file is what the encoding says; cells are checked later.
pub(super) fn open<'a>(
    bytes: &'a [u8],
    encoding: &str,
    limits: &Limits,
) -> Result<Box<dyn BufRead + 'a>, WeatherFault> {
    if bytes.is_empty() {
        return Err(WeatherFault::whole(
            "empty_file",
            "expected a CSV file; found no bytes at all",
        ));
    }
    let mut plain: Box<dyn BufRead + 'a> = if is_gzip(bytes) {
        Box::new(BufReader::with_capacity(PIECE, Capped::new(bytes, limits)))
    } else if bytes.len() as u64 > limits.max_decompressed_bytes {
        return Err(fault_of(&io::Error::other(Overrun::Bytes(
            limits.max_decompressed_bytes,
        ))));
    } else {
        Box::new(bytes)
    };
    let start = plain.fill_buf().map_err(|error| fault_of(&error))?;
    let declared = Encoding::for_label(encoding.as_bytes()).unwrap_or(UTF_8);
    let (encoding, marked) = Encoding::for_bom(start).map_or((declared, 0), |(found, length)| (found, length));
    super::sniff::not_text(&start[..start.len().min(SNIFFED)], encoding).map_or(Ok(()), Err)?;
    plain.consume(marked);
    if encoding == UTF_8 {
        return Ok(plain);
    }
    Ok(Box::new(BufReader::with_capacity(PIECE, Decoded::new(plain, encoding))))
}

/// Whether the file is gzipped.
pub(super) fn is_gzip(bytes: &[u8]) -> bool {
    bytes.starts_with(GZIP_MAGIC)
}

/// The first bytes of a file, decompressed but not decoded.
pub(super) fn start(bytes: &[u8], most: u64, limits: &Limits) -> Result<Vec<u8>, WeatherFault> {
    if !is_gzip(bytes) {
        return Ok(bytes[..bytes.len().min(most as usize)].to_vec());
    }
    let mut start = Vec::new();
    let read = Capped::new(bytes, limits).take(most).read_to_end(&mut start);
    read.map(|_| start).map_err(|error| fault_of(&error))
}

/// First two bytes of RFC 1952.
const GZIP_MAGIC: &[u8] = &[0x1f, 0x8b];
/// Bytes at the start that tell text from other things.
const SNIFFED: usize = 4096;
/// Bytes handled at a time.
const PIECE: usize = 64 * 1024;
/// A small file may grow any number of times.
const RATIO_COUNTS_FROM: u64 = 1024 * 1024;

/// A limit that was passed.
#[derive(Debug, thiserror::Error)]
pub(super) enum Overrun {
    #[error("the file holds more than {0} bytes after decompression")]
    Bytes(u64),
    #[error("the file grows more than {0} times when decompressed")]
    Ratio(u64),
}

/// What went wrong while reading, as a fault.
pub(super) fn fault_of(error: &io::Error) -> WeatherFault {
    match error.get_ref().and_then(|inner| inner.downcast_ref::<Overrun>()) {
        Some(overrun @ Overrun::Bytes(_)) => {
            WeatherFault::whole("too_large", format!("{overrun}; send fewer columns or a shorter span"))
        }
        Some(overrun @ Overrun::Ratio(_)) => {
            let detail = format!("{overrun}, which no weather does; send it uncompressed if it is right");
            WeatherFault::whole("compression_bomb", detail)
        }
        None => {
            let detail = format!("expected a whole gzip file; found a damaged or cut one ({error}). Send it again");
            WeatherFault::whole("damaged_gzip", detail)
        }
    }
}

/// Decompresses and stops at the limits.
struct Capped<'a> {
    plain: MultiGzDecoder<&'a [u8]>,
    compressed: u64,
    produced: u64,
    limits: Limits,
}

impl<'a> Capped<'a> {
    fn new(bytes: &'a [u8], limits: &Limits) -> Self {
        Self {
            plain: MultiGzDecoder::new(bytes),
            compressed: bytes.len() as u64,
            produced: 0,
            limits: *limits,
        }
    }
}

impl Read for Capped<'_> {
    fn read(&mut self, into: &mut [u8]) -> io::Result<usize> {
        let count = self.plain.read(into)?;
        self.produced += count as u64;
        if self.produced > self.limits.max_decompressed_bytes {
            return Err(io::Error::other(Overrun::Bytes(self.limits.max_decompressed_bytes)));
        }
        let grown = self.compressed.saturating_mul(self.limits.max_ratio);
        if self.produced > grown.max(RATIO_COUNTS_FROM) {
            return Err(io::Error::other(Overrun::Ratio(self.limits.max_ratio)));
        }
        Ok(count)
    }
}

/// Turns another encoding into UTF-8; what cannot be read becomes the replacement character.
struct Decoded<'a> {
    source: Box<dyn BufRead + 'a>,
    decoder: Decoder,
    finished: bool,
}

impl<'a> Decoded<'a> {
    fn new(source: Box<dyn BufRead + 'a>, encoding: &'static Encoding) -> Self {
        Self {
            source,
            decoder: encoding.new_decoder_without_bom_handling(),
            finished: false,
        }
    }
}

impl Read for Decoded<'_> {
    /// Needs room for at least one character.
    fn read(&mut self, into: &mut [u8]) -> io::Result<usize> {
        while !self.finished {
            let piece = self.source.fill_buf()?;
            let last = piece.is_empty();
            let (result, read, written, _) = self.decoder.decode_to_utf8(piece, into, last);
            self.source.consume(read);
            self.finished = last && result == encoding_rs::CoderResult::InputEmpty;
            if written > 0 {
                return Ok(written);
            }
        }
        Ok(0)
    }
}
