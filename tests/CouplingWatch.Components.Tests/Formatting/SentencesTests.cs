using CouplingWatch.Components.Formatting;

namespace CouplingWatch.Components.Tests.Formatting;

public sealed class SentencesTests
{
    [Theory]
    [InlineData("The residual grows.", "the residual grows.")]
    [InlineData("IQN-ILS stalls.", "IQN-ILS stalls.")]
    [InlineData("15.1 iterations", "15.1 iterations")]
    [InlineData("", "")]
    public void A_sentence_goes_on_after_a_colon(string text, string after) => Assert.Equal(after, Sentences.After(text));

    [Theory]
    [InlineData("lower the threshold", "Lower the threshold.")]
    [InlineData("Stop it.", "Stop it.")]
    [InlineData(" ", "")]
    public void A_phrase_becomes_a_sentence(string phrase, string whole) => Assert.Equal(whole, Sentences.Whole(phrase));

    [Fact]
    public void A_full_stop_is_never_doubled() => Assert.Equal(["a.", "a.", "a?", ""], ((string[])["a", "a.", "a?", ""]).Select(Sentences.Stopped));
}
