//! A stream that takes nothing, one that takes a little now and then.

use super::*;
use std::future::poll_fn;

/// Takes a byte at each `true`, makes the writer wait at each `false`, and takes nothing once the script, read from its end, is over.
struct Scripted(Vec<bool>);

impl AsyncWrite for Scripted {
    fn poll_write(mut self: Pin<&mut Self>, context: &mut Context<'_>, _: &[u8]) -> Poll<io::Result<usize>> {
        match self.0.pop() {
            Some(true) => Poll::Ready(Ok(1)),
            Some(false) => {
                context.waker().wake_by_ref();
                Poll::Pending
            }
            None => Poll::Pending,
        }
    }

    fn poll_flush(self: Pin<&mut Self>, _: &mut Context<'_>) -> Poll<io::Result<()>> {
        Poll::Pending
    }

    fn poll_shutdown(self: Pin<&mut Self>, _: &mut Context<'_>) -> Poll<io::Result<()>> {
        Poll::Ready(Ok(()))
    }
}

const PATIENCE: Duration = Duration::from_millis(100);

async fn written(stream: &mut Stalling<Scripted>) -> io::Result<usize> {
    poll_fn(|context| Pin::new(&mut *stream).poll_write(context, b"x")).await
}

#[tokio::test]
async fn writing_to_a_peer_that_takes_nothing_fails_after_the_patience() {
    let mut stream = Stalling::new(Scripted(vec![]), PATIENCE);
    let begun = crate::clock::now();
    assert_eq!(written(&mut stream).await.unwrap_err().kind(), ErrorKind::TimedOut);
    assert!(begun.elapsed() >= PATIENCE);
    let flushed = poll_fn(|context| Pin::new(&mut stream).poll_flush(context)).await;
    assert_eq!(flushed.unwrap_err().kind(), ErrorKind::TimedOut);
}

#[tokio::test]
async fn a_peer_that_takes_a_byte_is_waited_for_anew() {
    let mut stream = Stalling::new(Scripted(vec![true, false, true, false]), PATIENCE);
    for _ in 0..2 {
        assert_eq!(written(&mut stream).await.unwrap(), 1);
        tokio::time::sleep(PATIENCE).await;
        assert!(stream.waiting.is_none(), "no wait is left over from before");
    }
}
