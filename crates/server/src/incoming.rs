//! What comes in, sifted: only whole, well-formed messages are passed on.
//!
//! `tower-lsp` stops reading for good after one message that it cannot make out. Here such a message is answered with
//! an error, as JSON-RPC 2.0 (section 5.1) asks, and the next one is read.

use serde::Deserialize;
use serde_json::{Value, json};
use tokio::io::{
    AsyncBufRead, AsyncBufReadExt, AsyncRead, AsyncReadExt, AsyncWrite, AsyncWriteExt, BufReader,
};
use tokio::sync::mpsc;
use tower_lsp::jsonrpc::{Request, Response};

/// Longest line of a header, bytes: a stream without line ends is no reason to keep it all.
const LONGEST_HEADER_LINE: u64 = 4096;

/// Reads messages until the end of the input, passes on the good ones, and puts answers to the others into `refusals`.
pub(crate) async fn sift<I, O>(input: I, mut passed_on: O, refusals: mpsc::UnboundedSender<Vec<u8>>)
where
    I: AsyncRead + Unpin,
    O: AsyncWrite + Unpin,
{
    let mut input = BufReader::new(input);
    while let Some(length) = header(&mut input).await {
        let mut body = Vec::new();
        match (&mut input).take(length).read_to_end(&mut body).await {
            Ok(read) if read as u64 == length => {}
            _ => return,
        }
        match refusal(&body) {
            None => {
                if passed_on.write_all(&framed(&body)).await.is_err() {
                    return;
                }
            }
            Some(refusal) => {
                if refusals.send(framed(refusal.to_string().as_bytes())).is_err() {
                    return;
                }
            }
        }
    }
}

/// Length of the next body; lines that say nothing about it are passed over. `None` at the end of the input.
async fn header(input: &mut (impl AsyncBufRead + Unpin)) -> Option<u64> {
    let mut length = None;
    loop {
        let mut line = Vec::new();
        let read = (&mut *input).take(LONGEST_HEADER_LINE).read_until(b'\n', &mut line).await.ok()?;
        if read == 0 {
            return None;
        }
        let line = String::from_utf8_lossy(&line);
        match (line.trim(), length) {
            ("", Some(length)) => return Some(length),
            (line, _) => {
                if let Some((name, value)) = line.split_once(':')
                    && name.trim().eq_ignore_ascii_case("content-length")
                {
                    length = value.trim().parse().ok();
                }
            }
        }
    }
}

/// The answer to a body that is no message; `None` for one that is.
fn refusal(body: &[u8]) -> Option<Value> {
    let error = |id: Value, code: i64, message: &str| {
        Some(json!({"jsonrpc": "2.0", "id": id, "error": {"code": code, "message": message}}))
    };
    let Ok(said) = serde_json::from_slice::<Value>(body) else {
        return error(Value::Null, -32700, "not JSON");
    };
    if Request::deserialize(&said).is_ok() || Response::deserialize(&said).is_ok() {
        return None;
    }
    let id = said.get("id").filter(|id| id.is_number() || id.is_string()).cloned();
    error(id.unwrap_or_default(), -32600, "no message of JSON-RPC 2.0")
}

fn framed(body: &[u8]) -> Vec<u8> {
    let mut message = format!("Content-Length: {}\r\n\r\n", body.len()).into_bytes();
    message.extend_from_slice(body);
    message
}

#[cfg(test)]
mod tests {
    use super::*;

    async fn sifted(input: &[u8]) -> (String, Vec<String>) {
        let (refusals, mut refused) = mpsc::unbounded_channel();
        let mut passed_on = Vec::new();
        sift(input, &mut passed_on, refusals).await;
        let mut answers = Vec::new();
        while let Some(answer) = refused.recv().await {
            answers.push(String::from_utf8(answer).unwrap());
        }
        (String::from_utf8(passed_on).unwrap(), answers)
    }

    /// Codes: JSON-RPC 2.0, section 5.1.
    #[tokio::test]
    async fn bad_messages_are_answered_and_good_ones_pass() {
        let good = framed(br#"{"jsonrpc":"2.0","method":"exit"}"#);
        let mut input = b"noise\n".to_vec();
        input.extend(framed(b"{\"half"));
        input.extend(framed(br#"{"id":7,"jsonrpc":"1.0","method":1}"#));
        input.extend(framed(b"\xff\xfe"));
        input.extend_from_slice(&good);
        input.extend_from_slice(b"Content-Length: 99\r\n\r\ncut off");
        let (passed_on, answers) = sifted(&input).await;
        assert_eq!(passed_on.as_bytes(), good);
        let codes: Vec<bool> =
            answers.iter().zip(["-32700", "-32600", "-32700"]).map(|(a, code)| a.contains(code)).collect();
        assert_eq!(codes, [true, true, true], "{answers:?}");
        assert!(answers[1].contains("\"id\":7"));
    }

    #[tokio::test]
    async fn other_headers_and_spellings_are_read() {
        let (passed_on, _) =
            sifted(b"Content-Type: x\r\ncontent-length:33\r\n\r\n{\"jsonrpc\":\"2.0\",\"method\":\"exit\"}")
                .await;
        assert!(passed_on.ends_with("{\"jsonrpc\":\"2.0\",\"method\":\"exit\"}"));
    }
}
