/** The part of Plotly's figure language that the still picture draws. Builders keep to it. */
export interface TextSpec {
  readonly text?: string;
  readonly font?: FontSpec;
}

export interface FontSpec {
  readonly size?: number;
  readonly color?: string;
}

export interface LineSpec {
  readonly color?: string;
  readonly width?: number;
  /** `solid`, `dot`, `dash`, `dashdot`, or lengths such as `4px 2px`. */
  readonly dash?: string;
  /** `linear`, or `hv`, `hvh` for steps. */
  readonly shape?: string;
}

export interface MarkerSpec {
  readonly color?: string;
  readonly size?: number;
  readonly symbol?: string;
  readonly opacity?: number;
  readonly line?: LineSpec;
}

export interface ErrorSpec {
  readonly array?: readonly (number | null)[];
  readonly arrayminus?: readonly (number | null)[];
  readonly symmetric?: boolean;
  readonly visible?: boolean;
  readonly color?: string;
  readonly thickness?: number;
  readonly width?: number;
}

export interface TraceSpec {
  readonly type: string;
  readonly name?: string;
  readonly mode?: string;
  readonly x?: readonly (number | null)[];
  readonly y?: readonly (number | null)[];
  readonly z?: readonly (readonly (number | null)[])[];
  readonly width?: number | readonly number[];
  readonly text?: string | readonly string[];
  readonly textposition?: string;
  readonly textfont?: FontSpec;
  readonly xaxis?: string;
  readonly yaxis?: string;
  readonly marker?: MarkerSpec;
  readonly line?: LineSpec;
  readonly fill?: string;
  readonly fillcolor?: string;
  readonly error_x?: ErrorSpec;
  readonly error_y?: ErrorSpec;
  readonly colorscale?: readonly (readonly [number, string])[];
  readonly zmin?: number;
  readonly zmax?: number;
  readonly opacity?: number;
  readonly visible?: boolean | 'legendonly';
  readonly showlegend?: boolean;
  readonly legendgroup?: string;
}

export interface AxisSpec {
  readonly type?: string;
  readonly range?: readonly [number, number];
  readonly autorange?: boolean | 'reversed';
  readonly title?: TextSpec;
  readonly side?: 'top' | 'bottom' | 'left' | 'right';
  readonly domain?: readonly [number, number];
  readonly anchor?: string;
  readonly overlaying?: string;
  readonly matches?: string;
  readonly scaleanchor?: string;
  readonly scaleratio?: number;
  readonly tickvals?: readonly number[];
  readonly ticktext?: readonly string[];
  readonly ticks?: 'inside' | 'outside' | '';
  readonly tickfont?: FontSpec;
  readonly nticks?: number;
  readonly showgrid?: boolean;
  readonly showticklabels?: boolean;
  readonly visible?: boolean;
  readonly zeroline?: boolean;
}

export interface ShapeSpec {
  readonly type: 'line' | 'rect';
  readonly x0: number;
  readonly x1: number;
  readonly y0: number;
  readonly y1: number;
  readonly xref?: string;
  readonly yref?: string;
  readonly line?: LineSpec;
  readonly fillcolor?: string;
  readonly opacity?: number;
  /** `below` the traces, or above them (default). */
  readonly layer?: 'below' | 'above';
}

export interface AnnotationSpec {
  /** On a logarithmic axis the log10 of the value, as Plotly has it (shapes take the value itself). */
  readonly x: number;
  readonly y: number;
  readonly text: string;
  readonly xref?: string;
  readonly yref?: string;
  readonly showarrow?: boolean;
  readonly ax?: number;
  readonly ay?: number;
  readonly xanchor?: 'left' | 'center' | 'right';
  readonly yanchor?: 'top' | 'middle' | 'bottom';
  readonly xshift?: number;
  readonly yshift?: number;
  readonly textangle?: number;
  readonly font?: FontSpec;
}

export interface LegendSpec {
  readonly orientation?: 'v' | 'h';
  readonly title?: TextSpec;
}

export interface LayoutSpec {
  readonly title?: TextSpec;
  readonly showlegend?: boolean;
  readonly legend?: LegendSpec;
  readonly shapes?: readonly ShapeSpec[];
  readonly annotations?: readonly AnnotationSpec[];
  readonly barmode?: string;
  readonly height?: number;
}
