namespace CouplingWatch.Testing;

/// <summary>Where the reference data of the tests lie in the working copy.</summary>
public static class ReferenceData
{
    /// <summary>Path of <c>tests/reference</c> and the parts given under it. Throws when the working copy has no such folder.</summary>
    public static string Path(params string[] parts)
    {
        for (var folder = new DirectoryInfo(AppContext.BaseDirectory); folder is not null; folder = folder.Parent)
        {
            var candidate = System.IO.Path.Combine(folder.FullName, "tests", "reference");
            if (Directory.Exists(candidate)) return System.IO.Path.Combine([candidate, .. parts]);
        }
        throw new DirectoryNotFoundException($"No tests/reference above {AppContext.BaseDirectory}.");
    }

    /// <summary>The labelled recordings, in order of name.</summary>
    public static IReadOnlyList<string> Recordings() =>
        [.. Directory.GetFiles(Path("recordings"), "*.ndjson").Order(StringComparer.Ordinal)];
}
