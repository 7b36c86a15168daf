using System.Text;
using CouplingWatch.Ndjson;
using CouplingWatch.Records;

namespace CouplingWatch.StreamTests.Ndjson;

public sealed class RecordReaderTests
{
    private const string OpenLine =
        """{"kind":"open","seq":0,"format":1,"instance":"6f1c","at":"2026-12-01T08:00:00Z","campaign":"north-lock","title":"Leaf 80 mm, case 3","scheme":"serial","stepping":"transient","solvers":[{"name":"water","noise":1e-8,"cost":0.9},{"name":"leaf"}],"fields":[{"name":"deflection","unit":"m","size":120,"role":"unknown","from":"leaf","group":"gate","weight":1,"norm":"euclidean","relativeTo":"output","relative":1e-6,"absolute":1e-10}],"settings":{"method":"iqn-ils","relaxation":0.1,"historySteps":4,"filterRule":"own-norm","filterThreshold":1e-4,"iterationCap":40,"predictorOrder":1,"own":{}},"adjustable":{"relaxation":[0.01,1],"filterRule":["own-norm","pivot-ratio"],"filterThreshold":[1e-12,0.1],"historySteps":[0,40],"commands":["dropHistory","stop"]},"timeStep":0.01,"endTime":4.0,"allocationEndsAt":"2026-12-02T08:00:00Z","nodes":2,"beatSeconds":60,"continues":{"run":"leaf80-1","step":400,"basis":"kept"},"provenance":{"code":"x","mesh":"sha256:y"},"labels":{"thickness_mm":"80"}}""";

    private static RecordResult Read(string line, StreamShape? shape = null) => new RecordReader { Shape = shape }.Read(Encoding.UTF8.GetBytes(line), 1);

    [Fact]
    public void The_open_record_of_the_format_is_read_whole()
    {
        var open = Assert.IsType<OpenRecord>(Read(OpenLine).Record);
        Assert.Equal("Leaf 80 mm, case 3", open.Title);
        Assert.Equal(1e-8, open.Solvers[0].Noise);
        Assert.Equal(("gate", 120, 1e-6), (open.Fields[0].Group, open.Fields[0].Size, open.Fields[0].Relative!.Value));
        Assert.Equal((CouplingMethod.IqnIls, FilterRule.OwnNorm, 1e-4), (open.Settings.Method!.Value, open.Settings.FilterRule!.Value, open.Settings.FilterThreshold!.Value));
        Assert.Equal(new NumberRange(1e-12, 0.1), open.Adjustable.Ranges["filterThreshold"]);
        Assert.Equal(["dropHistory", "stop"], open.Adjustable.Commands);
        Assert.Equal(new Continuation("leaf80-1", 400, "kept"), open.Continues);
        Assert.Equal("80", open.Labels["thickness_mm"]);
    }

    [Fact]
    public void An_iteration_is_read_with_its_basis_its_places_and_its_vectors()
    {
        var vector = Convert.ToBase64String([.. BitConverter.GetBytes(1.0), .. BitConverter.GetBytes(-2.5)]);
        var record = Assert.IsType<IterationRecord>(Read($$$"""{"kind":"iteration","seq":41,"at":"2026-12-01T08:03:11.250Z","step":6,"iteration":2,"time":0.07,"timeStep":0.01,"residuals":{"deflection":3.12345678e-7},"targets":{"deflection":2.2e-8},"met":{"deflection":false},"worst":{"deflection":{"index":112,"value":2.9e-7,"at":[0,11.2,0]}},"vectors":{"residual":"{{{vector}}}","output":"{{{vector.Replace("/", "\\/", StringComparison.Ordinal)}}}"},"basis":{"columns":[[6,1,0],[6,0]],"left":[[5,2,1]],"r":[1,2,3],"coefficients":[4,5]},"surrogate":{"iterations":7,"seconds":0.4,"covered":0.93}}""").Record);
        Assert.Equal((41L, 6, 2), (record.Seq, record.Step, record.Iteration));
        Assert.True(record.Residuals.TryGet("deflection", out var norm));
        Assert.Equal(3.12345678e-7, norm);
        Assert.Equal(0, record.Met![0].Value);
        Assert.Equal([1.0, -2.5], record.Vectors!.Residual);
        Assert.Equal([1.0, -2.5], record.Vectors.Output);
        Assert.Equal([new ColumnBirth(6, 1), new ColumnBirth(6, 0)], record.Basis!.Columns);
        Assert.Equal([new ColumnBirth(5, 2, 1)], record.Basis.Left);
        Assert.Equal((112, 11.2), (record.Worst[0].Index, record.Worst[0].At![1]));
        Assert.Equal(0.93, record.Surrogate!.Covered);
    }

    [Theory]
    [InlineData("NaN", double.NaN)]
    [InlineData("nan", double.NaN)]
    [InlineData("-nan", double.NaN)]
    [InlineData("inf", double.PositiveInfinity)]
    [InlineData("+inf", double.PositiveInfinity)]
    [InlineData("-inf", double.NegativeInfinity)]
    [InlineData("Infinity", double.PositiveInfinity)]
    [InlineData("-Infinity", double.NegativeInfinity)]
    [InlineData("INF", double.PositiveInfinity)]
    [InlineData("\"NaN\"", double.NaN)]
    [InlineData("\"Infinity\"", double.PositiveInfinity)]
    [InlineData("\"-Infinity\"", double.NegativeInfinity)]
    [InlineData("1e999", double.PositiveInfinity)]
    public void Bare_tokens_and_strings_that_mean_no_number_are_taken_for_what_they_mean(string token, double expected)
    {
        var reader = new RecordReader();
        foreach (var _ in (int[])[1, 2])
        {
            var line = $$$"""{"kind":"iteration","seq":1,"step":0,"iteration":0,"residuals":{"nan \"inf\" \\":1.5,"inf":{{{token}}}},"time":{{{token}}} }""";
            var record = Assert.IsType<IterationRecord>(reader.Read(Encoding.UTF8.GetBytes(line)).Record);
            Assert.Equal(["nan \"inf\" \\", "inf"], record.Residuals.Names.ToArray());
            Assert.Equal(expected, record.Residuals.Values[1]);
            Assert.Equal(expected, record.Time);
        }
    }

    [Theory]
    [InlineData("""{"kind":"iteration","seq":1,"step":-1,"iteration":0,"residuals":{"a":1}}""", "step", ProblemCodes.OutOfRange)]
    [InlineData("""{"kind":"iteration","seq":1,"step":0,"iteration":1.5,"residuals":{"a":1}}""", "iteration", ProblemCodes.WrongType)]
    [InlineData("""{"kind":"iteration","seq":1,"step":0,"iteration":0,"residuals":{"a":"big"}}""", "residuals.a", ProblemCodes.WrongType)]
    [InlineData("""{"kind":"iteration","seq":1,"step":0,"iteration":0,"residuals":{"a":-1}}""", "residuals.a", ProblemCodes.OutOfRange)]
    [InlineData("""{"kind":"iteration","seq":1,"step":0,"iteration":0,"residuals":{"a":1,"a":2}}""", "residuals.a", ProblemCodes.Duplicate)]
    [InlineData("""{"kind":"iteration","seq":1,"step":0,"iteration":0,"residuals":{}}""", null, ProblemCodes.OutOfRange)]
    [InlineData("""{"kind":"iteration","seq":1,"step":0,"residuals":{"a":1}}""", "iteration", ProblemCodes.MissingMember)]
    [InlineData("""{"kind":"iteration","step":0,"iteration":0,"residuals":{"a":1}}""", "seq", ProblemCodes.MissingMember)]
    [InlineData("""{"kind":"iteration","seq":-3,"step":0,"iteration":0,"residuals":{"a":1}}""", "seq", ProblemCodes.OutOfRange)]
    [InlineData("""{"kind":"iteration","seq":1,"at":"2026-12-01T08:00:00","step":0,"iteration":0,"residuals":{"a":1}}""", "at", ProblemCodes.OutOfRange)]
    [InlineData("""{"kind":"iteration","seq":1,"step":0,"iteration":0,"residuals":{"a":1},"basis":{"columns":[[0,0],[0,1]],"r":[1,2]}}""", "basis", ProblemCodes.WrongLength)]
    [InlineData("""{"kind":"iteration","seq":1,"step":0,"iteration":0,"residuals":{"a":1},"basis":{"columns":[[0,0],[0]]}}""", "basis.columns[1]", ProblemCodes.WrongLength)]
    [InlineData("""{"kind":"iteration","seq":1,"step":0,"iteration":0,"residuals":{"a":1},"basis":{"columns":[[0,0]],"coefficients":[1,2]}}""", "basis", ProblemCodes.WrongLength)]
    [InlineData("""{"kind":"iteration","seq":1,"step":0,"iteration":0,"residuals":{"a":1},"vectors":{"residual":"AAAA","output":"AAAA"}}""", "vectors.residual", ProblemCodes.WrongLength)]
    [InlineData("""{"kind":"iteration","seq":1,"step":0,"iteration":0,"residuals":{"a":1},"vectors":{"residual":"AAAAAAAA8D8=","output":"%AAAAAAA8D8="}}""", "vectors.output", ProblemCodes.BadBase64)]
    [InlineData("""{"kind":"iteration","seq":1,"step":0,"iteration":0,"residuals":{"a":1},"vectors":{"residual":"AAAAAAAA8D8="}}""", "vectors.output", ProblemCodes.MissingMember)]
    [InlineData("""{"kind":"iteration","seq":1,"step":0,"iteration":0,"residuals":{"a":1},"vectors":{"residual":"AAAAAAAA8D8=","output":""}}""", "vectors", ProblemCodes.WrongLength)]
    [InlineData("""{"kind":"iteration","seq":1,"step":0,"iteration":0,"residuals":{"a":1},"sketch":{"rows":12,"seed":1}}""", "sketch.rows", ProblemCodes.OutOfRange)]
    [InlineData("""{"kind":"iteration","seq":1,"step":0,"iteration":0,"residuals":{"a":1},"sketch":{"rows":8,"seed":9007199254740992}}""", "sketch.seed", ProblemCodes.OutOfRange)]
    [InlineData("""{"kind":"step","seq":2,"step":0,"outcome":"fine"}""", "outcome", ProblemCodes.UnknownValue)]
    [InlineData("""{"kind":"open","seq":0,"format":2,"fields":[{"name":"a"}]}""", "format", ProblemCodes.UnsupportedFormat)]
    [InlineData("""{"kind":"open","seq":4,"format":1,"fields":[{"name":"a"}]}""", "seq", ProblemCodes.OutOfRange)]
    [InlineData("""{"kind":"open","seq":0,"format":1,"fields":[{"name":"a"},{"size":3}]}""", "fields[1].name", ProblemCodes.MissingMember)]
    [InlineData("""{"kind":"open","seq":0,"format":1,"fields":[{"name":"a"},{"name":"b","size":0}]}""", "fields[1].size", ProblemCodes.OutOfRange)]
    [InlineData("""{"kind":"open","seq":0,"format":1,"fields":[{"name":"a"},{"name":"a"}]}""", "fields[1]", ProblemCodes.Duplicate)]
    [InlineData("""{"kind":"open","seq":0,"format":1,"fields":[{"name":"a"}],"settings":{"method":"magic"}}""", "settings.method", ProblemCodes.UnknownValue)]
    [InlineData("""{"kind":"open","seq":0,"format":1,"fields":[{"name":"a"}],"settings":{"own":{"a":{"b":1,"b":2}}}}""", "settings.own", ProblemCodes.Duplicate)]
    [InlineData("""{"kind":"open","seq":0,"format":1,"fields":[{"name":"a"}],"adjustable":{"relaxation":[1,0.1]}}""", "adjustable.relaxation", ProblemCodes.OutOfRange)]
    [InlineData("""{"kind":"open","seq":0,"format":1,"fields":[]}""", "fields", ProblemCodes.WrongLength)]
    [InlineData("""{"kind":"weather","seq":5,"must":true}""", null, ProblemCodes.MustUnderstand)]
    [InlineData("""{"seq":5}""", "kind", ProblemCodes.MissingMember)]
    [InlineData("""{"kind":5}""", "kind", ProblemCodes.WrongType)]
    [InlineData("""[1,2]""", null, ProblemCodes.WrongType)]
    [InlineData("""{"kind":"remark","seq":5""", "seq", ProblemCodes.Malformed)]
    [InlineData("""{"kind":"remark","seq":5} x""", null, ProblemCodes.Malformed)]
    [InlineData("""{"kind":"remark","seq":5,"text":"\ud800"}""", "text", ProblemCodes.Malformed)]
    public void What_is_wrong_is_named_with_its_member_and_what_was_expected(string line, string? member, string code)
    {
        var problem = Read(line).Problem;
        Assert.NotNull(problem);
        Assert.Equal((code, member), (problem.Code, problem.Member));
        Assert.StartsWith("line 1", problem.Sentence, StringComparison.Ordinal);
    }

    [Fact]
    public void Nesting_deeper_than_a_record_may_be_is_a_problem_of_its_own()
    {
        foreach (var depth in (int[])[40, 5000])
        {
            var deep = new string('[', depth) + new string(']', depth);
            Assert.Equal(ProblemCodes.TooDeep, Read($$$"""{"kind":"remark","seq":5,"extra":{{{deep}}}}""").Problem?.Code);
            Assert.Equal(ProblemCodes.TooDeep, Read($$$"""{"extra":{{{deep}}},"kind":"remark","seq":5}""").Problem?.Code);
            Assert.Equal(ProblemCodes.TooDeep, Read($$$"""{"kind":"open","seq":0,"format":1,"fields":[{"name":"a"}],"settings":{"own":{"a":{{{deep}}} } } }""").Problem?.Code);
        }
    }

    [Fact]
    public void Unknown_members_kinds_blank_lines_byte_order_marks_and_line_ends_are_tolerated()
    {
        Assert.IsType<RemarkRecord>(Read("\uFEFF{\"text\":\"x\",\"ünit\":{\"a\":[1,{}]},\"seq\":5,\"kind\":\"remark\"}\r\n").Record);
        Assert.Equal(new UnknownRecord("weather") { Seq = 5 }, Read("""{"kind":"weather","seq":5,"wind":{"kind":"x"}}""").Record);
        Assert.True(Read(" \t\r\n").IsBlank);
        Assert.Equal(-1, Read("""{"kind":"beat","in":"water","insideSeconds":2460}""").Record!.Seq);
        Assert.Equal(11, Read("""{"kind":"beat","seq":11}""").Record!.Seq);
    }

    [Fact]
    public void Vector_lengths_are_held_against_the_declared_sizes_and_against_the_first_vector()
    {
        var reader = new RecordReader();
        string Iteration(int n, string extra = "") => $$$"""{"kind":"iteration","seq":1,"step":0,"iteration":0,"residuals":{"a":1},"vectors":{"residual":"{{{Base64(n)}}}","output":"{{{Base64(n)}}}"}{{{extra}}}}""";
        RecordResult Next(string line) => reader.Read(Encoding.UTF8.GetBytes(line), 7);
        Assert.NotNull(Next("""{"kind":"open","seq":0,"format":1,"fields":[{"name":"a","size":3},{"name":"b","size":2},{"name":"c","size":9,"role":"checked"}]}""").Record);
        Assert.Equal(5, reader.Shape!.VectorLength());
        Assert.NotNull(Next(Iteration(5)).Record);
        Assert.Equal((ProblemCodes.WrongLength, "vectors.residual", "4 values"), (Next(Iteration(4)).Problem!.Code, Next(Iteration(4)).Problem!.Member, Next(Iteration(4)).Problem!.Found));
        Assert.NotNull(Next("""{"kind":"resize","seq":2,"fields":[{"name":"a","size":3},{"name":"b"}],"basis":"cleared","reordered":false}""").Record);
        Assert.Null(reader.Shape.VectorLength());
        Assert.Equal(ProblemCodes.WrongLength, Next(Iteration(3)).Problem!.Code);
        Assert.NotNull(Next(Iteration(7)).Record);
        Assert.Equal(7, reader.Shape.VectorLength());
        Assert.Equal(ProblemCodes.WrongLength, Next(Iteration(8)).Problem!.Code);
    }

    [Fact]
    public void Groups_have_lengths_of_their_own_and_a_sketch_keeps_its_rows_and_seed()
    {
        var reader = new RecordReader();
        RecordResult Next(string line) => reader.Read(Encoding.UTF8.GetBytes(line));
        string Grouped(string gate) => $$$"""{"kind":"iteration","seq":1,"step":0,"iteration":0,"residuals":{"a":1},"groups":{"gate":{{{gate}}}}}""";
        string Sketch(int rows, int seed) => $$$"""{"sketch":{"rows":{{{rows}}},"seed":{{{seed}}},"residual":"{{{Base64(rows)}}}","output":"{{{Base64(rows)}}}"}}""";
        Assert.NotNull(Next("""{"kind":"open","seq":0,"format":1,"fields":[{"name":"a","size":3,"group":"gate"},{"name":"b","size":2,"group":"valve"}]}""").Record);
        Assert.NotNull(Next(Grouped($$$"""{"vectors":{"residual":"{{{Base64(3)}}}","output":"{{{Base64(3)}}}"}}""")).Record);
        Assert.Equal("groups.gate.vectors.residual", Next(Grouped($$$"""{"vectors":{"residual":"{{{Base64(5)}}}","output":"{{{Base64(5)}}}"}}""")).Problem!.Member);
        Assert.NotNull(Next(Grouped(Sketch(16, 7))).Record);
        Assert.NotNull(Next(Grouped(Sketch(16, 7))).Record);
        Assert.Equal(ProblemCodes.SketchChanged, Next(Grouped(Sketch(16, 8))).Problem!.Code);
        Assert.Equal(ProblemCodes.SketchChanged, Next(Grouped(Sketch(24, 7))).Problem!.Code);
    }

    [Fact]
    public void Names_are_built_once_a_stream_and_shared()
    {
        var reader = new RecordReader();
        IterationRecord Next() => (IterationRecord)reader.Read("""{"kind":"iteration","seq":1,"step":0,"iteration":0,"residuals":{"deflection":1,"wall":2},"magnitudes":{"deflection":1,"wall":2}}"""u8).Record!;
        var first = Next();
        var second = Next();
        Assert.Same(first.Residuals.Names[0], second.Magnitudes!.Names[0]);
        Assert.True(first.Residuals.Names == second.Magnitudes.Names, "records of one shape share the array of names");
    }

    private static string Base64(int length) => Convert.ToBase64String(new byte[8 * length]);
}
