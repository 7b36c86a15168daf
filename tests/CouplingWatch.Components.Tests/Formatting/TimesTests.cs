using CouplingWatch.Components.Formatting;

namespace CouplingWatch.Components.Tests.Formatting;

public sealed class TimesTests
{
    private static readonly DateTimeOffset Now = new(2026, 12, 1, 14, 32, 5, TimeSpan.Zero);

    [Theory]
    [InlineData(0, "14:32")]
    [InlineData(-14, "00:32")]
    [InlineData(36, "Thu 02:32")]
    [InlineData(-20, "Mon 18:32")]
    [InlineData(24 * 10, "11 Dec 14:32")]
    [InlineData(24 * 60, "30 Jan 2027")]
    public void A_moment_is_named_as_near_as_needed(int hours, string text) => Assert.Equal(text, Times.Near(Now.AddHours(hours), Now));

    [Fact]
    public void A_moment_is_shown_in_the_readers_zone()
    {
        var zone = TimeZoneInfo.CreateCustomTimeZone("lock", TimeSpan.FromHours(2), "lock", "lock");
        Assert.Equal("16:32", Times.Near(Now, Now, zone));
        Assert.Equal("Tue 1 Dec 2026, 16:32 UTC+02:00", Times.Full(Now, zone));
        Assert.Equal("Tue 1 Dec 2026, 14:32 UTC", Times.Full(Now));
        Assert.Equal("16:32:05", Times.Clock(Now, zone));
    }

    [Theory]
    [InlineData(0.25, "0.25 s")]
    [InlineData(2, "2 s")]
    [InlineData(156, "2.6 min")]
    [InlineData(2820, "47 min")]
    [InlineData(11880, "3.3 h")]
    [InlineData(200000, "2.3 d")]
    [InlineData(-90, "90 s")]
    public void A_span_is_written_in_one_unit(double seconds, string text) => Assert.Equal(text, Times.Span(TimeSpan.FromSeconds(seconds)));

    [Fact]
    public void What_has_just_happened_is_not_counted()
    {
        Assert.Equal("just now", Times.Ago(Now, Now.AddMilliseconds(600)));
        Assert.Equal("2 s ago", Times.Ago(Now, Now.AddSeconds(2.9)));
        Assert.Equal("just now", Times.Ago(Now.AddSeconds(3), Now));
    }

    [Fact]
    public void Machines_get_the_moment_in_full() => Assert.Equal("2026-12-01T14:32:05Z", Times.Iso(Now.ToOffset(TimeSpan.FromHours(5))));
}
