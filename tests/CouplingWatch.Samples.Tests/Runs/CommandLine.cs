using CoupledRuns;
using LockGate.Cases;

namespace CouplingWatch.Samples.Tests.Runs;

public class CommandLine
{
    private static SampleOptions? Parse(out string? trouble, params string[] args) => SampleOptions.Parse(args, "leaf", GateCases.Names, out trouble);

    [Fact]
    public void What_is_not_said_has_its_default()
    {
        Assert.Equal(new SampleOptions(null, "leaf-steady", "steady", 0, int.MaxValue), Parse(out var trouble));
        Assert.Null(trouble);
    }

    [Fact]
    public void Everything_can_be_said()
    {
        var options = Parse(out _, "--server", "http://localhost:5080", "--run", "leaf-7", "--case", "starved", "--pace", "2.5", "--steps", "12");
        Assert.Equal(new SampleOptions(new Uri("http://localhost:5080"), "leaf-7", "starved", 2.5, 12), options);
    }

    [Theory]
    [InlineData("--case", "nonsense", "--case nonsense")]
    [InlineData("--pace", "-1", "--pace -1")]
    [InlineData("--steps", "0", "--steps 0")]
    [InlineData("--server", "lock", "--server lock")]
    [InlineData("--colour", "red", "'--colour' is no option")]
    public void What_cannot_be_meant_is_named(string option, string value, string named)
    {
        Assert.Null(Parse(out var trouble, option, value));
        Assert.StartsWith(named, trouble, StringComparison.Ordinal);
    }

    [Fact]
    public void A_value_that_is_missing_is_asked_for()
    {
        Assert.Null(Parse(out var trouble, "--run"));
        Assert.Equal("--run needs a value.", trouble);
    }
}
