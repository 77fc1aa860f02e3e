//! The real program, started as a user would.

use std::io::{BufRead, BufReader};
use std::net::TcpStream;
use std::process::{Child, Command, Stdio};
use std::time::{Duration, Instant};

/// The program on a port of its own; ended when dropped.
pub struct Program {
    child: Child,
    pub address: String,
}

impl Program {
    pub fn start(arguments: &[&str]) -> Self {
        let mut child = Command::new(env!("CARGO_BIN_EXE_dipcast"))
            .args(["serve", "--bind", "127.0.0.1:0"])
            .args(arguments)
            // A bare system has no certificates; nothing here needs any.
            .env("SSL_CERT_FILE", "none")
            .env("SSL_CERT_DIR", "none")
            .env("DIPCAST__LOG__FORMAT", "json")
            .env("DIPCAST__STORE__FILE", "")
            .env("DIPCAST__WEATHER__NASA_POWER__ENABLED", "false")
            .stdout(Stdio::piped())
            .stderr(Stdio::piped())
            .spawn()
            .unwrap();
        let lines = BufReader::new(child.stderr.take().unwrap()).lines();
        let mut listening = lines.map(Result::unwrap).filter_map(|line| {
            let (_, rest) = line.split_once("listening on http://")?;
            rest.split_once(';').map(|(address, _)| address.to_owned())
        });
        let address = listening.next().unwrap();
        // The rest of the log is read away, so that the program never waits for us.
        std::thread::spawn(move || listening.count());
        Self { child, address }
    }

    pub fn connect(&self) -> TcpStream {
        TcpStream::connect(&self.address).unwrap()
    }

    /// Sends SIGTERM and waits for its end; the exit code and how long it took.
    pub fn terminate(&mut self) -> (Option<i32>, Duration) {
        let started = Instant::now();
        let sent = Command::new("kill")
            .args(["-TERM", &self.child.id().to_string()])
            .status()
            .unwrap();
        assert!(sent.success());
        (self.child.wait().unwrap().code(), started.elapsed())
    }

    /// What it prints, up to and with a line that starts so.
    pub fn printed_until(&mut self, last: &str) -> String {
        let lines = BufReader::new(self.child.stdout.take().unwrap())
            .lines()
            .map(Result::unwrap);
        let mut text = String::new();
        for line in lines {
            text.push_str(&line);
            text.push('\n');
            if line.starts_with(last) {
                break;
            }
        }
        text
    }

    /// Most memory ever used [MiB].
    pub fn peak_mib(&self) -> u64 {
        let status = std::fs::read_to_string(format!("/proc/{}/status", self.child.id())).unwrap();
        let line = status.lines().find(|line| line.starts_with("VmHWM")).unwrap();
        line.split_whitespace().nth(1).unwrap().parse::<u64>().unwrap() / 1024
    }
}

impl Drop for Program {
    fn drop(&mut self) {
        let _ = self.child.kill();
        let _ = self.child.wait();
    }
}
