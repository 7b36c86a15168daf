using CouplingWatch.Components.Ledger;
using CsCheck;

namespace CouplingWatch.Components.Tests.Ledger;

public class ThresholdTextTests
{
    [Theory]
    [InlineData("1e-4", 1e-4)]
    [InlineData(" 0.0001 ", 1e-4)]
    [InlineData("10^-4", 1e-4)]
    [InlineData("10⁻⁴", 1e-4)]
    [InlineData("2·10⁻⁵", 2e-5)]
    [InlineData("3.1 × 10⁻¹²", 3.1e-12)]
    [InlineData("2*10^-5", 2e-5)]
    [InlineData("0,01", 0.01)]
    [InlineData("0", 0)]
    public void What_people_type_is_understood(string text, double value) => Assert.Equal(value, ThresholdText.Parse(text)!.Value, 1e-9 * value);

    [Theory]
    [InlineData("")]
    [InlineData(null)]
    [InlineData("abc")]
    [InlineData("1")]
    [InlineData("-1e-3")]
    [InlineData("NaN")]
    [InlineData("10^")]
    public void What_is_no_threshold_is_refused(string? text) => Assert.Null(ThresholdText.Parse(text));

    [Fact]
    public void A_threshold_written_is_read_again() =>
        Gen.Double[-15, -0.01].Sample(decades =>
        {
            var value = ThresholdText.At(decades);
            Assert.Equal(value, ThresholdText.Parse(ThresholdText.Typed(value)));
            Assert.Equal(Math.Round(decades, 1), ThresholdText.Decades(value, -15), 0.11);
        });
}
