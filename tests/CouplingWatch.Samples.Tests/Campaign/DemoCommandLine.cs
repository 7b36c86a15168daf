using Demo.Campaign;

namespace CouplingWatch.Samples.Tests.Campaign;

public class DemoCommandLine
{
    [Fact]
    public void The_demos_own_options_are_taken_out_and_the_rest_is_the_servers()
    {
        var options = DemoOptions.Parse(["--urls", "http://localhost:5999", "--demo-speed", "2.5", "--runs", "starved,plate", "--data", "x"]);
        Assert.Equal(2.5, options.Speed);
        Assert.Equal(["starved", "plate"], options.Lanes);
        Assert.Equal(["--urls", "http://localhost:5999", "--data", "x"], options.Server);
    }

    [Theory]
    [InlineData("--demo-speed", "0")]
    [InlineData("--demo-speed", "fast")]
    [InlineData("--runs", "nothing")]
    [InlineData("--runs", ",")]
    public void What_cannot_be_meant_is_refused_by_name(string option, string value) =>
        Assert.StartsWith($"{option} {value}", Assert.Throws<ArgumentException>(() => DemoOptions.Parse([option, value])).Message, StringComparison.Ordinal);

    [Fact]
    public void A_wildcard_address_is_reached_on_this_machine()
    {
        Assert.Equal(new Uri("http://localhost:5080/"), CampaignService.Reachable("http://[::]:5080"));
        Assert.Equal(new Uri("http://127.0.0.1:5080/"), CampaignService.Reachable("http://127.0.0.1:5080"));
    }
}
