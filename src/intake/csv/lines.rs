//! Text a piece at a time, cut into lines where they lie, and never more of it held than the longest row allowed.

use std::io::{BufRead, Read};

use super::source::fault_of;
use crate::model::weather::WeatherFault;

/// Bytes read at a time.
const PIECE: usize = 256 * 1024;

/// The lines of a text. The line that was found last, and what it was extended by, can be looked at until the next one.
pub(super) struct Lines<'a> {
    source: Box<dyn BufRead + 'a>,
    buffer: Vec<u8>,
    /// Where the row begins, and where what was read ends.
    start: usize,
    end: usize,
    /// Bytes of the row without its line end, and with it.
    length: usize,
    taken: usize,
    finished: bool,
    longest: usize,
    /// Lines found so far.
    pub count: usize,
}

/// Why there is no further line.
pub(super) enum NoLine {
    /// The text is over.
    End,
    /// The row has become longer than allowed.
    TooLong,
    /// The source cannot be read.
    Broken(WeatherFault),
}

impl<'a> Lines<'a> {
    /// Lines of at most `longest` bytes.
    pub(super) fn new(source: Box<dyn BufRead + 'a>, longest: usize) -> Self {
        Self {
            source,
            buffer: Vec::new(),
            start: 0,
            end: 0,
            length: 0,
            taken: 0,
            finished: false,
            longest,
            count: 0,
        }
    }

    /// Moves to the next line.
    pub(super) fn advance(&mut self) -> Result<(), NoLine> {
        self.start += self.taken;
        (self.length, self.taken) = (0, 0);
        self.extend()
    }

    /// Makes the next line part of the row, with the line end between them.
    pub(super) fn extend(&mut self) -> Result<(), NoLine> {
        let mut searched = self.taken;
        loop {
            let rest = &self.buffer[self.start + searched..self.end];
            if let Some(at) = memchr::memchr(b'\n', rest) {
                return self.found(searched + at, searched + at + 1);
            }
            searched += rest.len();
            if searched > self.longest + 1 {
                self.length = searched;
                return Err(NoLine::TooLong);
            }
            if !self.fill()? {
                if searched == self.taken {
                    return Err(NoLine::End);
                }
                return self.found(searched, searched);
            }
        }
    }

    /// The row without its last line end.
    pub(super) fn row(&self) -> &[u8] {
        &self.buffer[self.start..self.start + self.length]
    }

    /// Most bytes of a row.
    pub(super) fn longest(&self) -> usize {
        self.longest
    }

    fn found(&mut self, length: usize, taken: usize) -> Result<(), NoLine> {
        self.count += 1;
        (self.length, self.taken) = (length, taken);
        if self.taken > self.length && self.row().last() == Some(&b'\r') {
            self.length -= 1;
        }
        if self.length > self.longest {
            return Err(NoLine::TooLong);
        }
        Ok(())
    }

    /// Reads a further piece behind what is there. False at the end of the text.
    fn fill(&mut self) -> Result<bool, NoLine> {
        if self.finished {
            return Ok(false);
        }
        if self.end == self.buffer.len() {
            self.buffer.copy_within(self.start..self.end, 0);
            (self.end, self.start) = (self.end - self.start, 0);
            if self.buffer.len() - self.end < PIECE / 2 {
                self.buffer.resize(self.end + PIECE, 0);
            }
        }
        let count = self.source.read(&mut self.buffer[self.end..]);
        let count = count.map_err(|error| NoLine::Broken(fault_of(&error)))?;
        self.end += count;
        self.finished = count == 0;
        Ok(count > 0)
    }
}
