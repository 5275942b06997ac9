//! As much of a WebSocket client as BiDi on this machine needs.

use std::io::{BufReader, Error, Read, Result, Write};
use std::net::TcpStream;
use std::time::Duration;

const TEXT: u8 = 1;
const CLOSE: u8 = 8;
const PING: u8 = 9;
const PONG: u8 = 10;

/// An open connection.
pub struct Socket(BufReader<TcpStream>);

impl Socket {
    /// Connects to a port of this machine.
    pub fn connect(port: u16, path: &str) -> Result<Socket> {
        let stream = TcpStream::connect(("127.0.0.1", port))?;
        stream.set_read_timeout(Some(Duration::from_secs(60)))?;
        let mut socket = Socket(BufReader::new(stream));
        let request = [
            &format!("GET {path} HTTP/1.1"),
            &format!("Host: 127.0.0.1:{port}"),
            "Connection: Upgrade",
            "Upgrade: websocket",
            "Sec-WebSocket-Version: 13",
            "Sec-WebSocket-Key: AAAAAAAAAAAAAAAAAAAAAA==",
            "\r\n",
        ];
        socket.0.get_mut().write_all(request.join("\r\n").as_bytes())?;
        let (mut head, mut byte) = (Vec::new(), [0]);
        while !head.ends_with(b"\r\n\r\n") {
            socket.0.read_exact(&mut byte)?;
            head.extend(byte);
        }
        if head.starts_with(b"HTTP/1.1 101") { Ok(socket) } else { Err(Error::other(String::from_utf8_lossy(&head))) }
    }

    /// Sends a text.
    pub fn send(&mut self, text: &str) -> Result<()> {
        self.frame(TEXT, text.as_bytes())
    }

    /// Waits for a text.
    pub fn receive(&mut self) -> Result<String> {
        let mut message = Vec::new();
        loop {
            let mut head = [0; 2];
            self.0.read_exact(&mut head)?;
            let length = match head[1] & 127 {
                126 => u64::from(u16::from_be_bytes(self.bytes()?)),
                127 => u64::from_be_bytes(self.bytes()?),
                length => u64::from(length),
            };
            let start = message.len();
            (&mut self.0).take(length).read_to_end(&mut message)?;
            match head[0] & 15 {
                CLOSE => return Err(Error::other("the browser closed the connection")),
                PING => {
                    let payload = message.split_off(start);
                    self.frame(PONG, &payload)?;
                }
                PONG => message.truncate(start),
                _ if head[0] & 128 != 0 => return String::from_utf8(message).map_err(Error::other),
                _ => {}
            }
        }
    }

    fn bytes<const N: usize>(&mut self) -> Result<[u8; N]> {
        let mut bytes = [0; N];
        self.0.read_exact(&mut bytes)?;
        Ok(bytes)
    }

    fn frame(&mut self, kind: u8, payload: &[u8]) -> Result<()> {
        let mut frame = vec![0x80 | kind];
        match payload.len() {
            length @ 0..126 => frame.push(0x80 | length as u8),
            length @ 126..65536 => {
                frame.push(0x80 | 126);
                frame.extend((length as u16).to_be_bytes());
            }
            length => {
                frame.push(0x80 | 127);
                frame.extend((length as u64).to_be_bytes());
            }
        }
        // A client must mask, and Firefox drops a connection whose mask is zero.
        let mask = [0x5a, 0xa5, 0x3c, 0xc3];
        frame.extend(mask);
        frame.extend(payload.iter().zip(mask.iter().cycle()).map(|(byte, mask)| byte ^ mask));
        self.0.get_mut().write_all(&frame)
    }
}
