//! Whether the editor that started the server still runs.
//!
//! An editor that dies closes the server's input, as a rule. A process in between (a wrapper script, a remote
//! connection) may keep it open; therefore `initialize` names the editor's process.

use std::time::Duration;

/// Between two looks.
const PERIOD: Duration = Duration::from_secs(1);

/// A process that can be looked for.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) struct Editor {
    id: u64,
}

impl Editor {
    /// The process of this number; `None` when it cannot be seen from here, now (another container, or a system
    /// where this is not known): its absence later would mean nothing.
    pub(crate) fn of(id: u64) -> Option<Editor> {
        let editor = Editor { id };
        editor.is_seen().then_some(editor)
    }

    /// Waits for its end.
    pub(crate) async fn gone(self) {
        while self.is_seen() {
            tokio::time::sleep(PERIOD).await;
        }
    }

    #[cfg(target_os = "linux")]
    fn is_seen(self) -> bool {
        std::path::Path::new("/proc").join(self.id.to_string()).exists()
    }

    /// Only the parent can be told without asking the system: an orphan gets another one.
    #[cfg(all(unix, not(target_os = "linux")))]
    fn is_seen(self) -> bool {
        u64::from(std::os::unix::process::parent_id()) == self.id
    }

    #[cfg(not(unix))]
    fn is_seen(self) -> bool {
        false
    }
}
