(** * Graphs that are written out: graph6, or a list of edges

    The vertices are 0, ..., n - 1. *)

From Coq Require Import Bool List ZArith Ascii String FMapPositive.
From Certify Require Import Statement Rules.
Import ListNotations.
Open Scope Z_scope.
Open Scope lazy_bool_scope.

(** ** Edges that are listed *)

(** Edges are looked up by their first vertex. Which edges share a place in the map does
    not matter: both vertices are compared. *)
Definition shelf (u : Z) : positive := Z.to_pos (u + 1).

Definition shelve (edges : list (Z * Z)) : PositiveMap.t (list (Z * Z)) :=
  fold_right
    (fun e m =>
       let i := shelf (fst e) in
       match PositiveMap.find i m with
       | Some l => PositiveMap.add i (e :: l) m
       | None => PositiveMap.add i [e] m
       end)
    (PositiveMap.empty _) edges.

Fixpoint listed (u v : Z) (edges : list (Z * Z)) : bool :=
  match edges with
  | [] => false
  | e :: l => ((u =? fst e) &&& (v =? snd e)) ||| listed u v l
  end.

Definition shelved (m : PositiveMap.t (list (Z * Z))) (u v : Z) : bool :=
  match PositiveMap.find (shelf u) m with
  | Some l => listed u v l
  | None => false
  end.

(** [joins edges u v]: (u, v) or (v, u) is in the list ([joins_spec]). *)
Definition joins (edges : list (Z * Z)) : Z -> Z -> bool :=
  let m := shelve edges in fun u v => shelved m u v ||| shelved m v u.

Definition edge_graph (n : Z) (edges : list (Z * Z)) : query Z :=
  {| vertices := range 0 (n - 1);
     adjacent := joins edges;
     ends := []; required := []; forbidden := [] |}.

(** The same graph, with demands. *)
Definition demand (Q : query Z) (ends : list Z) (required forbidden : list (Z * Z)) : query Z :=
  {| vertices := vertices Q;
     adjacent := adjacent Q;
     ends := ends; required := required; forbidden := forbidden |}.

(** ** graph6 (formats.txt of nauty) *)

(** Each character stands for six bits: its code less 63, the highest bit first. *)
Definition six_bits (c : ascii) : option (list bool) :=
  let code := Z.of_N (N_of_ascii c) - 63 in
  if (0 <=? code) &&& (code <=? 63)
  then Some (map (Z.testbit code) [5; 4; 3; 2; 1; 0])
  else None.

Fixpoint read_bits (s : string) : option (list bool) :=
  match s with
  | EmptyString => Some []
  | String c s' =>
      match six_bits c, read_bits s' with
      | Some b, Some bits => Some (b ++ bits)
      | _, _ => None
      end
  end.

Fixpoint number_of (k : nat) (bits : list bool) (value : Z) : option (Z * list bool) :=
  match k, bits with
  | O, _ => Some (value, bits)
  | S k', b :: bits' => number_of k' bits' (2 * value + Z.b2z b)
  | S _, [] => None
  end.

(** The number of vertices: six bits, or eighteen after six ones. It has the shorter form
    if it can, and a graph of more than 258,047 is not read. *)
Definition read_size (bits : list bool) : option (Z * list bool) :=
  match number_of 6 bits 0 with
  | Some (63, rest) =>
      match number_of 18 rest 0 with
      | Some (n, rest') => if (63 <=? n) &&& (n <? 63 * 2 ^ 12) then Some (n, rest') else None
      | None => None
      end
  | small => small
  end.

(** A bit for each pair u < v, in the order (0,1), (0,2), (1,2), (0,3), ...; at the end
    fewer than six more, all zero. *)
Fixpoint read_pairs (n u v : Z) (bits : list bool) : option (list (Z * Z)) :=
  match bits with
  | [] => if n <=? v then Some [] else None
  | b :: bits' =>
      if n <=? v then
        if Nat.ltb (List.length bits) 6 &&& forallb negb bits then Some [] else None
      else
        let rest := if u + 1 =? v then read_pairs n 0 (v + 1) bits'
                    else read_pairs n (u + 1) v bits' in
        if b then option_map (cons (u, v)) rest else rest
  end.

Definition read_graph6 (s : string) : option (Z * list (Z * Z)) :=
  match read_bits s with
  | None => None
  | Some bits =>
      match read_size bits with
      | None => None
      | Some (n, rest) => option_map (pair n) (read_pairs n 0 1 rest)
      end
  end.

(** A text that is not graph6 stands for no graph; a theorem about [graph6 s] says
    [is_graph6 s = true] as well. *)
Definition is_graph6 (s : string) : bool :=
  match read_graph6 s with
  | Some _ => true
  | None => false
  end.

Definition graph6 (s : string) : query Z :=
  match read_graph6 s with
  | Some (n, edges) => edge_graph n edges
  | None => edge_graph 0 []
  end.

(** ** What [joins] means *)

Lemma listed_spec : forall u v l, listed u v l = true <-> In (u, v) l.
Proof.
  intros u v l. induction l as [|[x y] l IH]; simpl; [intuition discriminate|].
  rewrite <- andb_lazy_alt, <- orb_lazy_alt, orb_true_iff, andb_true_iff, !Z.eqb_eq, IH.
  intuition congruence.
Qed.

Lemma shelved_spec : forall edges u v, shelved (shelve edges) u v = true <-> In (u, v) edges.
Proof.
  intros edges u v. unfold shelved. induction edges as [|[x y] edges IH]; simpl.
  - rewrite PositiveMap.gempty. intuition discriminate.
  - rewrite <- IH. clear IH.
    destruct (Pos.eq_dec (shelf u) (shelf x)) as [Heq|Hother].
    + rewrite Heq. destruct (PositiveMap.find (shelf x) (shelve edges)) as [l|];
        rewrite PositiveMap.gss, !listed_spec; simpl; intuition (congruence || discriminate).
    + assert (u <> x) by congruence.
      destruct (PositiveMap.find (shelf x) (shelve edges)) as [l|];
        rewrite PositiveMap.gso by assumption; intuition congruence.
Qed.

Lemma joins_spec : forall edges u v,
  joins edges u v = true <-> In (u, v) edges \/ In (v, u) edges.
Proof.
  intros edges u v. unfold joins.
  now rewrite <- orb_lazy_alt, orb_true_iff, !shelved_spec.
Qed.
